import type { Problem } from '$lib/domain/problem';

/** What the page's forms answer when something stands in the way; `values.form` names the form. */
export interface PageFailure {
	problem: Problem;
	issues: Record<string, string>;
	values: Record<string, string>;
}

/** The failure of one form of the page; null: another one's, or none. `match` narrows it to one thing of a list. */
export function failureOf(
	failure: PageFailure | null | undefined,
	form: string,
	match: Record<string, string> = {}
): PageFailure | null {
	if (!failure || failure.values.form !== form) return null;
	const fits = Object.entries(match).every(([name, value]) => failure.values[name] === value);
	return fits ? failure : null;
}
