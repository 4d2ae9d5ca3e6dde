import type { Person } from '$lib/domain/person/person';
import type { Engine } from '$lib/domain/reading/reading';
import type { DraftState } from '$lib/domain/runbook/review';
import type { RunbookRecord, RunbookState } from '$lib/domain/runbook/runbook';
import type { RunbookFilter } from '$lib/domain/runbook/runbook-filter';
import type { SymptomId } from '$lib/domain/symptom/symptom';
import type { Place } from '../api/cursor';
import { fromJson } from '../db/json';
import { select, selectOne, type Replacements } from '../db/query';

/** A runbook with the text that people see: the published revision, else the newest. */
export interface StoredRunbook {
	id: number;
	slug: string;
	state: RunbookState;
	owner: Person | null;
	reviewer: Person | null;
	reviewDue: string | null;
	/** Of the text below. */
	revision: number;
	title: string;
	summary: string;
	body: string;
	engines: Engine[];
	symptoms: SymptomId[];
	reviewEveryDays: number;
	record: RunbookRecord;
	/** Who wrote the text; null: it came with Catchwater. */
	authorId: number | null;
	/** null: nothing was published yet, or it is a draft again. */
	publishedRevision: number | null;
	newestRevision: number;
	/** How far the newest text is beside the published one; null: there is none. */
	draftState: DraftState | null;
}

interface Row
	extends Omit<StoredRunbook, 'owner' | 'reviewer' | 'engines' | 'symptoms' | 'record'>, RunbookRecord {
	ownerId: number | null;
	ownerName: string | null;
	reviewerId: number | null;
	reviewerName: string | null;
	engines: string;
	symptoms: string;
}

const countOf = (outcome: string) => `coalesce(sum(outcome = '${outcome}'), 0)`;

const fromRevision = (revision: string) => `FROM runbooks b
	JOIN runbookRevisions r ON r.runbookId = b.id AND r.revision = ${revision}
	LEFT JOIN people owner ON owner.id = b.ownerId
	LEFT JOIN people reviewer ON reviewer.id = b.reviewerId
	LEFT JOIN (
		SELECT runbookSlug, ${countOf('worked')} AS worked, ${countOf('partly')} AS partly,
			${countOf('no-effect')} AS noEffect, ${countOf('made-worse')} AS madeWorse
		FROM attempts WHERE runbookSlug IS NOT NULL GROUP BY runbookSlug
	) a ON a.runbookSlug = b.slug`;

const FROM = fromRevision('coalesce(b.publishedRevision, b.revision)');

const COLUMNS = `b.id, b.slug, b.state, b.reviewDue, r.revision, r.title, r.summary, r.body, r.engines, r.symptoms,
	r.reviewEveryDays, r.createdById AS authorId, b.publishedRevision, b.revision AS newestRevision, b.draftState,
	b.ownerId, owner.name AS ownerName, b.reviewerId, reviewer.name AS reviewerName,
	coalesce(a.worked, 0) AS worked, coalesce(a.partly, 0) AS partly, coalesce(a.noEffect, 0) AS noEffect,
	coalesce(a.madeWorse, 0) AS madeWorse`;

function toPerson(id: number | null, name: string | null): Person | null {
	return id === null ? null : { id, name: name ?? '' };
}

function toRunbook(row: Row): StoredRunbook {
	const { ownerId, ownerName, reviewerId, reviewerName, engines, symptoms, ...rest } = row;
	const { worked, partly, noEffect, madeWorse, ...runbook } = rest;
	return {
		...runbook,
		owner: toPerson(ownerId, ownerName),
		reviewer: toPerson(reviewerId, reviewerName),
		engines: fromJson<Engine[]>(engines),
		symptoms: fromJson<SymptomId[]>(symptoms),
		record: { worked, partly, noEffect, madeWorse }
	};
}

interface Where {
	sql: string;
	values: Replacements;
}

/** A word to be found as it stands: the wildcards of LIKE are escaped. */
function likeWord(word: string): string {
	return `%${word.replace(/[\\%_]/g, '\\$&')}%`;
}

function toWhere(filter: Pick<RunbookFilter, 'state' | 'engine' | 'symptom' | 'q'>): Where {
	const parts = ['1 = 1'];
	const values: Replacements = {};
	if (filter.state !== undefined) {
		// What waits beside a published text is looked for by its own state, too.
		parts.push('(b.state = :state OR b.draftState = :state)');
		values.state = filter.state;
	}
	if (filter.engine !== undefined) {
		parts.push('EXISTS (SELECT 1 FROM json_each(r.engines) WHERE value = :engine)');
		values.engine = filter.engine;
	}
	if (filter.symptom !== undefined) {
		parts.push('EXISTS (SELECT 1 FROM json_each(r.symptoms) WHERE value = :symptom)');
		values.symptom = filter.symptom;
	}
	for (const [index, word] of (filter.q ?? '').split(/\s+/).filter(Boolean).slice(0, 20).entries()) {
		parts.push(`(r.title || ' ' || r.summary || ' ' || r.body) LIKE :word${index} ESCAPE '\\'`);
		values[`word${index}`] = likeWord(word);
	}
	return { sql: parts.join(' AND '), values };
}

/** Runbooks under a filter by title, from a place on. */
export async function listRunbooks(
	filter: RunbookFilter,
	page: { after: Place | null; limit: number }
): Promise<StoredRunbook[]> {
	const { sql, values } = toWhere(filter);
	const after = page.after === null ? '' : 'AND (r.title, b.id) > (:afterKey, :afterId)';
	const rows = await select<Row>(
		`SELECT ${COLUMNS} ${FROM} WHERE ${sql} ${after} ORDER BY r.title, b.id LIMIT :pageSize`,
		{
			...values,
			pageSize: page.limit,
			...(page.after === null ? {} : { afterKey: page.after.key, afterId: page.after.id })
		}
	);
	return rows.map(toRunbook);
}

/** How many runbooks a filter leaves. */
export async function countRunbooks(filter: RunbookFilter): Promise<number> {
	const { sql, values } = toWhere(filter);
	const row = await selectOne<{ total: number }>(`SELECT count(*) AS total ${FROM} WHERE ${sql}`, values);
	return row?.total ?? 0;
}

/** Published runbooks for any of the symptoms on an engine; null: on any engine. */
export async function listForSymptoms(
	symptoms: readonly SymptomId[],
	engine: Engine | null
): Promise<StoredRunbook[]> {
	if (symptoms.length === 0) return [];
	const onEngine =
		engine === null ? '' : 'AND EXISTS (SELECT 1 FROM json_each(r.engines) WHERE value = :engine)';
	const rows = await select<Row>(
		`SELECT ${COLUMNS} ${FROM} WHERE b.state = 'published' ${onEngine}
		AND EXISTS (SELECT 1 FROM json_each(r.symptoms) WHERE value IN (:symptoms))`,
		{ symptoms, ...(engine === null ? {} : { engine }) }
	);
	return rows.map(toRunbook);
}

/** One runbook, with the text of a revision where one is named; null: there is none of that slug, or no such revision. */
export async function findRunbook(
	slug: string,
	revision: number | null = null
): Promise<StoredRunbook | null> {
	const from = revision === null ? FROM : fromRevision(':revision');
	const row = await selectOne<Row>(`SELECT ${COLUMNS} ${from} WHERE b.slug = :slug`, { slug, revision });
	return row === null ? null : toRunbook(row);
}

/** One runbook with its newest text, published or not; null: there is none of that slug. */
export async function findNewest(slug: string): Promise<StoredRunbook | null> {
	const row = await selectOne<Row>(`SELECT ${COLUMNS} ${fromRevision('b.revision')} WHERE b.slug = :slug`, {
		slug
	});
	return row === null ? null : toRunbook(row);
}

/** Slugs that are taken. */
export async function listSlugs(): Promise<string[]> {
	return (await select<{ slug: string }>('SELECT slug FROM runbooks')).map(({ slug }) => slug);
}
