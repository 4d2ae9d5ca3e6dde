import { select } from '../db/query';

/** Which of these incident numbers there are. */
export async function findIncidents(numbers: readonly number[]): Promise<Set<number>> {
	if (numbers.length === 0) return new Set();
	const rows = await select<{ number: number }>('SELECT number FROM incidents WHERE number IN (:numbers)', {
		numbers
	});
	return new Set(rows.map(({ number }) => number));
}

/** Which of these slugs name a runbook, and its state. */
export async function findRunbookStates(slugs: readonly string[]): Promise<Map<string, string>> {
	if (slugs.length === 0) return new Map();
	const rows = await select<{ slug: string; state: string }>(
		'SELECT slug, state FROM runbooks WHERE slug IN (:slugs)',
		{ slugs }
	);
	return new Map(rows.map(({ slug, state }) => [slug, state]));
}
