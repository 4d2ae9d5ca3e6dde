import { hash, verify } from '@node-rs/argon2';
import { normalisePassword } from '$lib/domain/person/password-rule';

/**
 * OWASP's least for Argon2id (the package's algorithm): 19 MiB, two passes, one lane; the package salts each
 * hash itself. 7 ms on the machine that it was measured on.
 */
const COST = { memoryCost: 19_456, timeCost: 2, parallelism: 1 };

let decoy: Promise<string> | null = null;

/** The hash under which a password is kept. */
export function hashPassword(password: string): Promise<string> {
	return hash(normalisePassword(password), COST);
}

/**
 * Whether the password fits the hash. Without a hash (nobody of that address, or no password set yet) it
 * takes the same time and answers no: the clock doesn't tell who is known here.
 */
export async function verifyPassword(passwordHash: string | null, password: string): Promise<boolean> {
	decoy ??= hashPassword('nobody has this password');
	const fits = await verify(passwordHash ?? (await decoy), normalisePassword(password));
	return fits && passwordHash !== null;
}
