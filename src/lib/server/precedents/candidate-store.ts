import type { EvidenceProfile } from '$lib/domain/precedent/precedent';
import type { IncidentState } from '$lib/domain/incident/incident';
import type { Engine } from '$lib/domain/reading/reading';
import { fromJson } from '$lib/server/db/json';
import { select, selectOne } from '$lib/server/db/query';

/** The incident asked about: its own words and setting. null: there is no such incident. */
export interface AskedIncident {
	number: number;
	title: string;
	narrative: string;
	service: string | null;
	engine: Engine | null;
	database: string | null;
	startedAt: string | null;
	createdAt: string;
	cause: string | null;
	evidence: EvidenceProfile | null;
}

export async function readAskedIncident(number: number): Promise<AskedIncident | null> {
	const row = await selectOne<Omit<AskedIncident, 'evidence'> & { evidence: string | null }>(
		`SELECT i.number, i.title, i.narrative, i.service, i.engine, i.database, i.startedAt, i.createdAt, i.cause,
			p.evidence
		FROM incidents i LEFT JOIN precedentProfiles p ON p.incidentNumber = i.number WHERE i.number = :number`,
		{ number }
	);
	if (row === null) return null;
	return { ...row, evidence: row.evidence === null ? null : fromJson<EvidenceProfile>(row.evidence) };
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
export interface CandidateRow {
	number: number;
	title: string;
	/** First characters of the narrative: symptoms told in words are looked for in it. */
	opening: string;
	service: string | null;
	engine: Engine | null;
	database: string | null;
	state: IncidentState;
	startedAt: string | null;
	resolvedAt: string | null;
	cause: string | null;
	/** First characters, as many as may be shown and searched for causes. */
	resolution: string | null;
	evidence: EvidenceProfile | null;
}

/** Of narrative and resolution this much is looked at for symptoms and causes told in words. */
const OPENING = 2000;

/** The incidents with these numbers; merged ones are left out, for they stand under another number. */
export async function readCandidates(numbers: readonly number[]): Promise<CandidateRow[]> {
	if (numbers.length === 0) return [];
	const rows = await select<Omit<CandidateRow, 'evidence'> & { evidence: string | null }>(
		`SELECT i.number, i.title, substr(i.narrative, 1, :opening) AS opening, i.service, i.engine, i.database,
			i.state, i.startedAt, i.resolvedAt, i.cause, substr(i.resolution, 1, :opening) AS resolution, p.evidence
		FROM incidents i LEFT JOIN precedentProfiles p ON p.incidentNumber = i.number
		WHERE i.number IN (:numbers) AND i.mergedInto IS NULL`,
		{ numbers: [...numbers], opening: OPENING }
	);
	return rows.map((row) => ({
		...row,
		evidence: row.evidence === null ? null : fromJson<EvidenceProfile>(row.evidence)
	}));
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
