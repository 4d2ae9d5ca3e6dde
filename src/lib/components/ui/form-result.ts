import type { Problem } from '$lib/domain/problem';

/** What came of one of several forms on a page. */
export interface FormResult {
	/** What was done, in a sentence; null: nothing was. */
	done: string | null;
	problem: Problem | null;
	/** What is wrong with which field. */
	issues: Record<string, string>;
	/** What was typed; empty after success. */
	values: Record<string, string>;
}

/** What a form action answers, success or failure: both name the form by `part`. */
interface Answer {
	part?: string;
	done?: string;
	problem?: Problem;
	issues?: Record<string, string>;
	values?: Record<string, string>;
}

/** What came of the form of that name; null: it was not the one sent. */
export function resultOf(form: Answer | null | undefined, part: string): FormResult | null {
	if (!form) return null;
	if (form.problem === undefined)
		return form.part === part ? { done: form.done ?? null, problem: null, issues: {}, values: {} } : null;
	const { problem, issues = {}, values = {} } = form;
	return values['part'] === part ? { done: null, problem, issues, values } : null;
}
