import type { IncidentSort } from '$lib/domain/incident/incident-filter';

/** What narrows the list; the rest of the address only orders and turns pages. */
export const FILTER_NAMES = [
	'q',
	'state',
	'severity',
	'service',
	'engine',
	'symptom',
	'owner',
	'from',
	'to'
] as const;

/** The filters behind "more": they open by themselves when one of them is set. */
export const MORE_NAMES = ['service', 'engine', 'symptom', 'owner', 'from', 'to'] as const;

/** Whether any of these stands in the address with a value. */
export function isSet(params: URLSearchParams, names: readonly string[]): boolean {
	return names.some((name) => params.getAll(name).some((value) => value !== ''));
}

/** The query with some names replaced (null: taken out), without empty ones: "?state=open&sort=number". */
export function withQuery(params: URLSearchParams, changes: Record<string, string | null>): string {
	const next = new URLSearchParams([...params].filter(([name, value]) => value !== '' && !(name in changes)));
	for (const [name, value] of Object.entries(changes)) if (value !== null) next.set(name, value);
	const text = next.toString();
	return text === '' ? '?' : `?${text}`;
}

/** What a click on a column does: sorts by it, the other way round when it is sorted by already. */
export function nextSort(sort: IncidentSort, column: SortColumn): IncidentSort {
	const first = FIRST[column];
	if (sort !== first) return first;
	return first.startsWith('-') ? column : `-${column}`;
}

export type SortColumn = 'number' | 'severity' | 'startedAt' | 'updatedAt';

/** The way one wants first: the worst, the newest, the highest number. */
const FIRST: Record<SortColumn, IncidentSort> = {
	number: '-number',
	severity: 'severity',
	startedAt: '-startedAt',
	updatedAt: '-updatedAt'
};

/** How a column is sorted, for aria-sort; null: the list is in the order of another one. */
export function sortedBy(sort: IncidentSort, column: SortColumn): 'ascending' | 'descending' | null {
	if (sort === column) return 'ascending';
	return sort === `-${column}` ? 'descending' : null;
}
