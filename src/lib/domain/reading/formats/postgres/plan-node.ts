/**
 * What every PostgreSQL form is first read into: one object per node under the key names of the JSON form
 * ("Node Type", "Plan Rows"), children in "Plans", workers in "Workers". Text, YAML and XML meet here.
 */
export type PlanNode = { [key: string]: unknown };

/** The envelope of one explained statement: "Plan", "Planning Time", "Settings" and so on. */
export type PlanEnvelope = { [key: string]: unknown };

/** Whether a value is an object with named members. */
export function isRecord(value: unknown): value is PlanNode {
	return typeof value === 'object' && value !== null && !Array.isArray(value);
}

/** A figure from 0 up that a count can reach, also where it is written as text; null where there is none. */
export function figure(value: unknown): number | null {
	return upTo(Number.MAX_SAFE_INTEGER, value);
}

/** The planner's guesses go further than any count: it stops at 1e100 rows (costsize.c, MAXIMUM_ROWCOUNT). */
export function estimate(value: unknown): number | null {
	return upTo(1e100, value);
}

function upTo(most: number, value: unknown): number | null {
	if (typeof value === 'number') return value >= 0 && value <= most ? value : null;
	if (typeof value !== 'string' || value.trim() === '') return null;
	const number = Number(value);
	return number >= 0 && number <= most ? number : null;
}

/** Text that is not empty; null where there is none. */
export function words(value: unknown): string | null {
	if (typeof value === 'string') return value === '' ? null : value;
	return typeof value === 'number' ? String(value) : null;
}

/** A list of texts; a lone text is a list of one. */
export function wordList(value: unknown): string[] {
	if (Array.isArray(value)) {
		const list: string[] = [];
		for (const item of value) if (typeof item === 'string') list.push(item);
		return list;
	}
	return typeof value === 'string' && value !== '' ? [value] : [];
}

/** True for a boolean true in any spelling of the four forms. */
export function isTrue(value: unknown): boolean {
	return value === true || value === 'true';
}

/** The objects in a list; a lone object is a list of one. */
export function records(value: unknown): PlanNode[] {
	if (Array.isArray(value)) return value.filter(isRecord);
	return isRecord(value) ? [value] : [];
}
