import { fromJson, toJson } from '$lib/server/db/json';
import { execute, select, selectOne } from '$lib/server/db/query';
import type { EvidenceProfile, ToldProfile } from '$lib/domain/precedent/precedent';
import type { Reading } from '$lib/domain/reading/reading';

/** What the index reads of an incident. */
export interface IncidentWords {
	number: number;
	title: string;
	narrative: string;
	resolution: string | null;
	service: string | null;
	database: string | null;
	engine: string | null;
	cause: string | null;
	labels: string[];
	owner: string | null;
}

/** null: there is no such incident. */
export async function readIncidentWords(number: number): Promise<IncidentWords | null> {
	const row = await selectOne<Omit<IncidentWords, 'labels'> & { labels: string }>(
		`SELECT i.number, i.title, i.narrative, i.resolution, i.service, i.database, i.engine, i.cause, i.labels,
			p.name AS owner
		FROM incidents i LEFT JOIN people p ON p.id = i.ownerId WHERE i.number = :number`,
		{ number }
	);
	return row === null ? null : { ...row, labels: fromJson<string[]>(row.labels) };
}

export function listEntryTexts(number: number): Promise<{ id: number; revision: number; text: string }[]> {
	return select('SELECT id, revision, text FROM entries WHERE incidentNumber = :number ORDER BY at, id', {
		number
	});
}

/** Evidence of how it was after a remedy tells nothing of what the incident was. */
const OF_THE_INCIDENT = 'NOT EXISTS (SELECT 1 FROM attempts a WHERE a.afterEvidenceId = e.id)';

/** Names of an incident's evidence, and the ids of its readings as one text that changes whenever they do. */
export async function readEvidenceState(number: number): Promise<{ names: string[]; readingIds: string }> {
	const names = await select<{ name: string }>(
		'SELECT name FROM evidence WHERE incidentNumber = :number ORDER BY id',
		{ number }
	);
	const ids = await select<{ id: number }>(
		`SELECT r.id FROM readings r JOIN evidence e ON e.id = r.evidenceId
		WHERE e.incidentNumber = :number AND ${OF_THE_INCIDENT} ORDER BY r.id`,
		{ number }
	);
	return { names: names.map((row) => row.name), readingIds: ids.map((row) => row.id).join(',') };
}

export async function listReadings(number: number): Promise<Reading[]> {
	const rows = await select<{ body: string }>(
		`SELECT r.body FROM readings r JOIN evidence e ON e.id = r.evidenceId
		WHERE e.incidentNumber = :number AND ${OF_THE_INCIDENT} ORDER BY r.id`,
		{ number }
	);
	return rows.map((row) => fromJson<Reading>(row.body));
}

/** What an incident's readings show and its words tell of. */
export type IndexedProfile = EvidenceProfile & ToldProfile;

/** A profile as it stands in the index, with the words that the evidence is found by. */
export interface StoredProfile {
	profile: IndexedProfile;
	words: string;
	/** Ids of the readings that it was drawn from. */
	readingIds: string;
	/** The entries whose words are in the index: "id:revision", one after the other. */
	entries: string;
	analysis: number;
}

export async function readStoredProfile(number: number): Promise<StoredProfile | null> {
	const row = await selectOne<Omit<StoredProfile, 'profile'> & { evidence: string }>(
		'SELECT evidence, words, readingIds, entries, analysis FROM precedentProfiles WHERE incidentNumber = :number',
		{ number }
	);
	if (row === null) return null;
	const { evidence, ...rest } = row;
	return { ...rest, profile: fromJson<IndexedProfile>(evidence) };
}

export async function writeProfile(number: number, stored: StoredProfile): Promise<void> {
	const { profile, ...rest } = stored;
	await execute(
		`INSERT INTO precedentProfiles(incidentNumber, evidence, words, readingIds, entries, analysis)
		VALUES (:number, :evidence, :words, :readingIds, :entries, :analysis)
		ON CONFLICT (incidentNumber) DO UPDATE SET evidence = excluded.evidence, words = excluded.words,
			readingIds = excluded.readingIds, entries = excluded.entries, analysis = excluded.analysis`,
		{ ...rest, number, evidence: toJson(profile) }
	);
}

/** Replaces the postings that lead to an incident. */
export async function writePostings(number: number, features: readonly string[]): Promise<void> {
	await execute('DELETE FROM precedentPostings WHERE incidentNumber = :number', { number });
	if (features.length === 0) return;
	await execute(
		`INSERT INTO precedentPostings(feature, incidentNumber)
		SELECT value, :number FROM json_each(:features)`,
		{ number, features: toJson(features) }
	);
}

/** The terms of one incident, column by column, as domain/search/index-text.ts makes them. */
export interface IncidentTerms {
	title: string;
	narrative: string;
	resolution: string;
	entries: string;
	evidence: string;
	ideas: string;
}

export async function writeIncidentTerms(number: number, terms: IncidentTerms): Promise<void> {
	await execute(
		`INSERT OR REPLACE INTO incidentText(rowid, title, narrative, resolution, entries, evidence, ideas)
		VALUES (:number, :title, :narrative, :resolution, :entries, :evidence, :ideas)`,
		{ ...terms, number }
	);
}

export async function writeEntryTerms(id: number, text: string): Promise<void> {
	await execute('INSERT OR REPLACE INTO entryText(rowid, text) VALUES (:id, :text)', { id, text });
}

export interface RunbookWords {
	id: number;
	slug: string;
	title: string;
	summary: string;
	body: string;
	symptoms: string[];
	engines: string[];
	owner: string | null;
}

/** The revision that people see: the published one, else the newest. null: there is no such runbook. */
export async function readRunbookWords(slug: string): Promise<RunbookWords | null> {
	const row = await selectOne<
		Omit<RunbookWords, 'symptoms' | 'engines'> & { symptoms: string; engines: string }
	>(
		`SELECT b.id, b.slug, r.title, r.summary, r.body, r.symptoms, r.engines, p.name AS owner
		FROM runbooks b JOIN runbookRevisions r ON r.runbookId = b.id AND r.revision = coalesce(b.publishedRevision, b.revision)
		LEFT JOIN people p ON p.id = b.ownerId WHERE b.slug = :slug`,
		{ slug }
	);
	if (row === null) return null;
	return { ...row, symptoms: fromJson<string[]>(row.symptoms), engines: fromJson<string[]>(row.engines) };
}

export async function writeRunbookTerms(
	id: number,
	terms: { title: string; summary: string; body: string }
): Promise<void> {
	await execute(
		`INSERT OR REPLACE INTO runbookText(rowid, title, summary, body) VALUES (:id, :title, :summary, :body)`,
		{ ...terms, id }
	);
}

/** Numbers of incidents whose index is older than `analysis` or missing, lowest first. */
export async function listBehind(analysis: number, above: number, limit: number): Promise<number[]> {
	const rows = await select<{ number: number }>(
		`SELECT i.number FROM incidents i LEFT JOIN precedentProfiles p ON p.incidentNumber = i.number
		WHERE i.number > :above AND (p.analysis IS NULL OR p.analysis <> :analysis) ORDER BY i.number LIMIT :limit`,
		{ analysis, above, limit }
	);
	return rows.map((row) => row.number);
}

export async function countIndex(analysis: number): Promise<{ documents: number; behind: number }> {
	const row = await selectOne<{ incidents: number; current: number; runbooks: number }>(
		`SELECT (SELECT count(*) FROM incidents) AS incidents,
			(SELECT count(*) FROM precedentProfiles WHERE analysis = :analysis) AS current,
			(SELECT count(*) FROM runbooks) AS runbooks`,
		{ analysis }
	);
	if (row === null) return { documents: 0, behind: 0 };
	return { documents: row.current + row.runbooks, behind: row.incidents - row.current };
}

/** Incident numbers above `above`, lowest first. */
export async function listNumbers(above: number, limit: number): Promise<number[]> {
	const rows = await select<{ number: number }>(
		'SELECT number FROM incidents WHERE number > :above ORDER BY number LIMIT :limit',
		{ above, limit }
	);
	return rows.map((row) => row.number);
}

export async function listSlugs(): Promise<string[]> {
	const rows = await select<{ slug: string }>('SELECT slug FROM runbooks ORDER BY id');
	return rows.map((row) => row.slug);
}

/** Forgets all words and features: what a rebuild begins with. */
export async function clearIndex(): Promise<void> {
	await execute(`INSERT INTO incidentText(incidentText) VALUES ('delete-all')`);
	await execute(`INSERT INTO runbookText(runbookText) VALUES ('delete-all')`);
	await execute(`INSERT INTO entryText(entryText) VALUES ('delete-all')`);
	await execute('DELETE FROM precedentPostings');
	await execute('DELETE FROM precedentProfiles');
}
