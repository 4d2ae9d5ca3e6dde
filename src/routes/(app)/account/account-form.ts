import type { Problem } from '$lib/domain/problem';

/** What came of a form on the account page. */
export interface AccountForm {
	part: 'password' | 'sign-ins' | 'tokens';
	/** What was done, in a sentence; null: nothing was. */
	done: string | null;
	/** A token just made: shown this once. */
	token: string | null;
	problem: Problem | null;
	/** What is wrong with which field. */
	issues: Record<string, string>;
	values: Record<string, string>;
}
