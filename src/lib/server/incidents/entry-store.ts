import type { Entry, EntryKind } from '$lib/domain/incident/incident';
import type { Place } from '../api/cursor';
import { EntryModel } from '../db/models/entry';
import { EntryRevisionModel } from '../db/models/entry-revision';
import { select, selectOne } from '../db/query';
import type { Transaction } from '../db/transaction';
import { toPerson } from './incident-store';

interface EntryRow {
	id: number;
	at: string;
	text: string;
	authorId: number | null;
	authorName: string | null;
	kind: EntryKind;
	revision: number;
}

const COLUMNS = 'e.id, e.at, e.text, e.authorId, p.name AS authorName, e.kind, e.revision';
const FROM = 'FROM entries e LEFT JOIN people p ON p.id = e.authorId';

function toEntry(row: EntryRow): Entry {
	return {
		id: row.id,
		at: row.at,
		text: row.text,
		author: toPerson(row.authorId, row.authorName),
		kind: row.kind,
		revision: row.revision
	};
}

/** The log of an incident, earliest first: all of it, or `limit` entries after a place. */
export async function listEntries(
	incidentNumber: number,
	page: { after: Place | null; limit: number } | null = null
): Promise<Entry[]> {
	const after = page?.after ?? null;
	const rows = await select<EntryRow>(
		`SELECT ${COLUMNS} ${FROM} WHERE e.incidentNumber = :incidentNumber
		${after === null ? '' : 'AND (e.at, e.id) > (:afterKey, :afterId)'}
		ORDER BY e.at, e.id ${page === null ? '' : 'LIMIT :pageSize'}`,
		{
			incidentNumber,
			...(after === null ? {} : { afterKey: after.key, afterId: after.id }),
			...(page === null ? {} : { pageSize: page.limit })
		}
	);
	return rows.map(toEntry);
}

/** How many entries the log of an incident has. */
export async function countEntries(incidentNumber: number): Promise<number> {
	const row = await selectOne<{ total: number }>(
		'SELECT COUNT(*) AS total FROM entries WHERE incidentNumber = :incidentNumber',
		{ incidentNumber }
	);
	return row?.total ?? 0;
}

/** One entry of an incident; null where that incident has none of that id. */
export async function findEntry(incidentNumber: number, id: number): Promise<Entry | null> {
	const row = await selectOne<EntryRow>(
		`SELECT ${COLUMNS} ${FROM} WHERE e.incidentNumber = :incidentNumber AND e.id = :id`,
		{ incidentNumber, id }
	);
	return row === null ? null : toEntry(row);
}

/** What a new entry is made of. */
export interface NewEntry {
	incidentNumber: number;
	at: string;
	text: string;
	authorId: number | null;
	kind: EntryKind;
	/** When it was written, which may be later than what it tells of. */
	createdAt: string;
}

/** Writes a new entry and answers its id. */
export async function insertEntry(entry: NewEntry, transaction: Transaction): Promise<number> {
	const created = await EntryModel.create(
		{ ...entry, revision: 1, updatedAt: entry.createdAt },
		{ transaction }
	);
	return created.id;
}

/** Corrects an entry and keeps what was there before. */
export async function replaceEntry(
	before: Entry,
	after: { at: string; text: string },
	changed: { byId: number | null; at: string },
	transaction: Transaction
): Promise<void> {
	await EntryRevisionModel.create(
		{
			entryId: before.id,
			revision: before.revision,
			text: before.text,
			at: before.at,
			changedById: changed.byId,
			changedAt: changed.at
		},
		{ transaction }
	);
	await EntryModel.update(
		{ at: after.at, text: after.text, revision: before.revision + 1, updatedAt: changed.at },
		{ where: { id: before.id }, transaction }
	);
}
