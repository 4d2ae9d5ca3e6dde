import type { RunbookInput } from './runbook-input';

/** The form of a runbook as it was typed, fit or not. */
export interface RunbookValues {
	title: string;
	summary: string;
	body: string;
	engines: string[];
	symptoms: string[];
	reviewEveryDays: string;
	/** What was changed and why. */
	note: string;
}

/** A stored text as the form shows it; the note is of the next revision, so it is empty. */
export function toValues(input: RunbookInput): RunbookValues {
	const { title, summary, body, engines, symptoms, reviewEveryDays } = input;
	return {
		...{ title, summary, body, note: '' },
		engines: [...engines],
		symptoms: [...symptoms],
		reviewEveryDays: String(reviewEveryDays)
	};
}

/** Reads the form's fields; line ends become those of the stored text (forms send CRLF). */
export function readValues(readAll: (name: string) => string[]): RunbookValues {
	const one = (name: string) => (readAll(name)[0] ?? '').replace(/\r\n?/g, '\n');
	return {
		title: one('title'),
		summary: one('summary'),
		body: one('body'),
		engines: readAll('engines'),
		symptoms: readAll('symptoms'),
		reviewEveryDays: one('reviewEveryDays'),
		note: one('note')
	};
}
