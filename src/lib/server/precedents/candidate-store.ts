import type { ProfileFields } from '$lib/domain/precedent/profile';
import type { IncidentState } from '$lib/domain/incident/incident';
import { fromJson } from '$lib/server/db/json';
import { select, selectOne } from '$lib/server/db/query';
import type { IndexedProfile } from '$lib/server/search/index-store';

/** The incident asked about: its own words and setting. null: there is no such incident. */
export interface AskedIncident extends ProfileFields {
	number: number;
	title: string;
	narrative: string;
	createdAt: string;
	profile: IndexedProfile | null;
}

export async function readAskedIncident(number: number): Promise<AskedIncident | null> {
	const row = await selectOne<Omit<AskedIncident, 'profile'> & { evidence: string | null }>(
		`SELECT i.number, i.title, i.narrative, i.service, i.engine, i.database, i.startedAt, i.createdAt, i.cause,
			p.evidence
		FROM incidents i LEFT JOIN precedentProfiles p ON p.incidentNumber = i.number WHERE i.number = :number`,
		{ number }
	);
	return row === null ? null : withProfile(row);
}

function withProfile<T extends { evidence: string | null }>(
	row: T
): Omit<T, 'evidence'> & { profile: IndexedProfile | null } {
	const { evidence, ...rest } = row;
	return { ...rest, profile: evidence === null ? null : fromJson<IndexedProfile>(evidence) };
}

/** In how many incidents each of the terms occurs; those that none holds are missing. */
export async function countTerms(terms: readonly string[]): Promise<Map<string, number>> {
	if (terms.length === 0) return new Map();
	const rows = await select<{ term: string; doc: number }>(
		'SELECT term, doc FROM incidentTerms WHERE term IN (:terms)',
		{ terms: [...terms] }
	);
	return new Map(rows.map((row) => [row.term, row.doc]));
}

export async function countIncidents(): Promise<number> {
	const row = await selectOne<{ n: number }>('SELECT count(*) AS n FROM precedentProfiles');
	return row?.n ?? 0;
}

/** BM25 of the incidents that an expression meets (higher is better), the best first. */
export async function matchWords(
	expression: string,
	limit: number
): Promise<{ number: number; bm25: number }[]> {
	return select(
		`SELECT rowid AS number, -rank AS bm25 FROM incidentText
		WHERE incidentText MATCH :expression ORDER BY rank LIMIT :limit`,
		{ expression, limit }
	);
}

/** In how many incidents each of the features occurs; those that none has are missing. */
export async function countFeatures(features: readonly string[]): Promise<Map<string, number>> {
	if (features.length === 0) return new Map();
	// As JSON: a list of parameters may not be as long as the features of all candidates together.
	const rows = await select<{ feature: string; incidents: number }>(
		'SELECT f.feature, f.incidents FROM json_each(:features) w JOIN precedentFeatures f ON f.feature = w.value',
		{ features: JSON.stringify(features) }
	);
	return new Map(rows.map((row) => [row.feature, row.incidents]));
}

/** Incidents that share features, those with the most weight in common first. */
export async function matchFeatures(
	weights: readonly { feature: string; weight: number }[],
	limit: number
): Promise<number[]> {
	if (weights.length === 0) return [];
	const rows = await select<{ number: number }>(
		`SELECT p.incidentNumber AS number
		FROM json_each(:weights) w JOIN precedentPostings p ON p.feature = w.value ->> 'feature'
		GROUP BY p.incidentNumber ORDER BY sum(w.value ->> 'weight') DESC, p.incidentNumber DESC LIMIT :limit`,
		{ weights: JSON.stringify(weights), limit }
	);
	return rows.map((row) => row.number);
}

/** An incident as a candidate: everything but its long texts. */
export interface CandidateRow extends ProfileFields {
	number: number;
	title: string;
	state: IncidentState;
	resolvedAt: string | null;
	/** First characters. */
	resolution: string | null;
	profile: IndexedProfile | null;
}

/** Characters of a resolution that are shown. */
const RESOLUTION_SHOWN = 300;

/** The incidents with these numbers; merged ones are left out, for they stand under another number. */
export async function readCandidates(numbers: readonly number[]): Promise<CandidateRow[]> {
	if (numbers.length === 0) return [];
	const rows = await select<Omit<CandidateRow, 'profile'> & { evidence: string | null }>(
		`SELECT i.number, i.title, i.service, i.engine, i.database, i.state, i.startedAt, i.resolvedAt, i.cause,
			substr(i.resolution, 1, :shown) AS resolution, p.evidence
		FROM incidents i LEFT JOIN precedentProfiles p ON p.incidentNumber = i.number
		WHERE i.number IN (:numbers) AND i.mergedInto IS NULL`,
		{ numbers: [...numbers], shown: RESOLUTION_SHOWN }
	);
	return rows.map(withProfile);
}

/** Numbers of all incidents that are not merged into another: for small collections. */
export async function listNumbers(): Promise<number[]> {
	const rows = await select<{ number: number }>('SELECT number FROM incidents WHERE mergedInto IS NULL');
	return rows.map((row) => row.number);
}

/** The texts of incidents that shared words are looked for in. */
export async function readTexts(numbers: readonly number[]): Promise<Map<number, string>> {
	if (numbers.length === 0) return new Map();
	const rows = await select<{ number: number; text: string }>(
		`SELECT number, title || char(10) || substr(narrative, 1, 20000) || char(10) ||
			substr(coalesce(resolution, ''), 1, 20000) AS text
		FROM incidents WHERE number IN (:numbers)`,
		{ numbers: [...numbers] }
	);
	return new Map(rows.map((row) => [row.number, row.text]));
}
