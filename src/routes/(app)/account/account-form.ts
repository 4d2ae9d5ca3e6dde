import type { FormResult } from '$lib/components/ui/form-result';

/** What came of a form on the account page. */
export interface AccountForm extends FormResult {
	part: 'password' | 'sign-ins' | 'tokens';
	/** A token just made: shown this once. */
	token: string | null;
}
