import type { SearchFilters } from '$lib/domain/search/parse-query';
import { fromJson } from '$lib/server/db/json';
import { select, type Replacements } from '$lib/server/db/query';

/** Characters of a long text that a snippet is looked for in. */
const SNIPPET_TEXT = 8000;

/** Conditions on incidents `i` for the filters, and their parameters. */
function toConditions(filters: SearchFilters): { sql: string; values: Replacements } {
	const conditions: string[] = [];
	const values: Record<string, Replacements[string]> = {};
	if (filters.symptoms.length > 0) {
		conditions.push(
			'i.number IN (SELECT incidentNumber FROM incidentSymptoms WHERE symptomId IN (:symptoms))'
		);
		values.symptoms = filters.symptoms;
	}
	if (filters.services.length > 0) {
		conditions.push('lower(i.service) IN (:services)');
		values.services = filters.services.map((service) => service.toLowerCase());
	}
	if (filters.engines.length > 0) {
		conditions.push('i.engine IN (:engines)');
		values.engines = filters.engines;
	}
	if (filters.states.length > 0) {
		conditions.push('i.state IN (:states)');
		values.states = filters.states;
	}
	if (filters.since !== null) {
		conditions.push('coalesce(i.startedAt, i.createdAt) >= :since');
		values.since = filters.since;
	}
	if (filters.until !== null) {
		conditions.push('coalesce(i.startedAt, i.createdAt) < :until');
		values.until = filters.until;
	}
	return { sql: conditions.map((condition) => ` AND ${condition}`).join(''), values };
}

/** Numbers of the incidents that an expression meets, best first. */
export async function matchIncidents(
	expression: string,
	filters: SearchFilters,
	limit: number
): Promise<string[]> {
	const { sql, values } = toConditions(filters);
	const rows = await select<{ number: number }>(
		`SELECT t.rowid AS number FROM incidentText t JOIN incidents i ON i.number = t.rowid
		WHERE incidentText MATCH :expression${sql} ORDER BY t.rank LIMIT :limit`,
		{ ...values, expression, limit }
	);
	return rows.map((row) => String(row.number));
}

/** Ids of the entries that an expression meets, best first. */
export async function matchEntries(
	expression: string,
	filters: SearchFilters,
	limit: number
): Promise<string[]> {
	const { sql, values } = toConditions(filters);
	const rows = await select<{ id: number }>(
		`SELECT t.rowid AS id FROM entryText t JOIN entries e ON e.id = t.rowid
		JOIN incidents i ON i.number = e.incidentNumber
		WHERE entryText MATCH :expression${sql} ORDER BY t.rank LIMIT :limit`,
		{ ...values, expression, limit }
	);
	return rows.map((row) => String(row.id));
}

/** Slugs of the runbooks that an expression meets, best first. */
export async function matchRunbooks(expression: string, limit: number): Promise<string[]> {
	const rows = await select<{ slug: string }>(
		`SELECT b.slug FROM runbookText t JOIN runbooks b ON b.id = t.rowid
		WHERE runbookText MATCH :expression ORDER BY t.rank LIMIT :limit`,
		{ expression, limit }
	);
	return rows.map((row) => row.slug);
}

/** Numbers of the incidents that pass the filters, newest first. */
export async function filterIncidents(filters: SearchFilters, limit: number): Promise<string[]> {
	const { sql, values } = toConditions(filters);
	const rows = await select<{ number: number }>(
		`SELECT i.number FROM incidents i WHERE i.mergedInto IS NULL${sql}
		ORDER BY i.startedAt DESC, i.number DESC LIMIT :limit`,
		{ ...values, limit }
	);
	return rows.map((row) => String(row.number));
}

/** Those of the numbers that pass the filters. */
export async function keepFiltered(numbers: readonly string[], filters: SearchFilters): Promise<Set<string>> {
	if (numbers.length === 0) return new Set();
	const { sql, values } = toConditions(filters);
	const rows = await select<{ number: number }>(
		`SELECT i.number FROM incidents i WHERE i.number IN (:numbers)${sql}`,
		{ ...values, numbers: numbers.map(Number) }
	);
	return new Set(rows.map((row) => String(row.number)));
}

/** What is shown of a thing found: its title and the texts that a snippet may be cut from. */
export interface FoundTexts {
	key: string;
	title: string;
	texts: string[];
}

export async function readIncidentTexts(numbers: readonly string[]): Promise<FoundTexts[]> {
	if (numbers.length === 0) return [];
	const rows = await select<{
		number: number;
		title: string;
		narrative: string;
		resolution: string;
		entries: string;
	}>(
		`SELECT number, title, substr(narrative, 1, :length) AS narrative,
			substr(coalesce(resolution, ''), 1, :length) AS resolution,
			coalesce((SELECT substr(group_concat(e.text, char(10)), 1, :length) FROM entries e
				WHERE e.incidentNumber = i.number), '') AS entries
		FROM incidents i WHERE number IN (:numbers)`,
		{ numbers: numbers.map(Number), length: SNIPPET_TEXT }
	);
	return rows.map(({ number, title, narrative, resolution, entries }) => ({
		key: String(number),
		title,
		texts: [narrative, resolution, entries]
	}));
}

export async function readEntryTexts(ids: readonly string[]): Promise<(FoundTexts & { incident: number })[]> {
	if (ids.length === 0) return [];
	const rows = await select<{ id: number; number: number; title: string; text: string }>(
		`SELECT e.id, i.number, i.title, substr(e.text, 1, :length) AS text
		FROM entries e JOIN incidents i ON i.number = e.incidentNumber WHERE e.id IN (:ids)`,
		{ ids: ids.map(Number), length: SNIPPET_TEXT }
	);
	return rows.map((row) => ({
		key: String(row.id),
		title: row.title,
		texts: [row.text],
		incident: row.number
	}));
}

export async function readRunbookTexts(
	slugs: readonly string[]
): Promise<(FoundTexts & { engines: string[]; symptoms: string[] })[]> {
	if (slugs.length === 0) return [];
	const rows = await select<{
		slug: string;
		title: string;
		summary: string;
		body: string;
		engines: string;
		symptoms: string;
	}>(
		`SELECT b.slug, r.title, r.summary, substr(r.body, 1, :length) AS body, r.engines, r.symptoms
		FROM runbooks b JOIN runbookRevisions r ON r.runbookId = b.id AND r.revision = coalesce(b.publishedRevision, b.revision)
		WHERE b.slug IN (:slugs)`,
		{ slugs: [...slugs], length: SNIPPET_TEXT }
	);
	return rows.map((row) => ({
		key: row.slug,
		title: row.title,
		texts: [row.summary, row.body],
		engines: fromJson<string[]>(row.engines),
		symptoms: fromJson<string[]>(row.symptoms)
	}));
}
