import { findPasswordFault } from '$lib/domain/person/password-rule';
import { DEMO_PASSWORD } from './demo-password';

/** What is wrong with a new password; null where it will do. */
export function findNewPasswordFault(
	password: string,
	person: { name: string; email: string }
): string | null {
	if (password === DEMO_PASSWORD) return 'This is the password of the demonstration, known to all.';
	return findPasswordFault(password, person);
}
