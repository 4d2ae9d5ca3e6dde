import { MailModel, type MailState } from '../db/models/mail';
import { execute, select, selectOne } from '../db/query';
import type { Transaction } from '../db/transaction';

export interface MailRecord {
	id: number;
	recipient: string;
	subject: string;
	/** null: it went to a mail server, or was given up. */
	text: string | null;
	state: MailState;
	createdAt: string;
	sentAt: string | null;
	tries: number;
	nextTryAt: string;
	failure: string | null;
}

/** A mail that still has its text. */
export type WaitingMail = MailRecord & { text: string };

/** Adds a mail that waits. */
export async function insertMail(
	fields: { recipient: string; subject: string; text: string; createdAt: string },
	transaction: Transaction
): Promise<void> {
	await MailModel.create({ ...fields, state: 'waiting', nextTryAt: fields.createdAt }, { transaction });
}

/** The mail whose turn it is; null: none. */
export function findDue(now: string): Promise<WaitingMail | null> {
	return selectOne<WaitingMail>(
		`SELECT * FROM mails WHERE state = 'waiting' AND text IS NOT NULL AND nextTryAt <= :now
		ORDER BY id LIMIT 1`,
		{ now }
	);
}

/** Changes what is known of a mail's way. */
export async function updateMail(
	id: number,
	fields: Partial<Pick<MailRecord, 'state' | 'text' | 'sentAt' | 'tries' | 'nextTryAt' | 'failure'>>,
	transaction: Transaction
): Promise<void> {
	await MailModel.update(fields, { where: { id }, transaction });
}

/** Mails, newest first, from before an id (null: from the newest). */
export function listMails(beforeId: number | null, limit: number): Promise<MailRecord[]> {
	return select<MailRecord>(
		'SELECT * FROM mails WHERE (:beforeId IS NULL OR id < :beforeId) ORDER BY id DESC LIMIT :limit',
		{ beforeId, limit }
	);
}

export async function countMails(): Promise<number> {
	const row = await selectOne<{ total: number }>('SELECT COUNT(*) AS total FROM mails');
	return row?.total ?? 0;
}

/** One mail; null where there is none. */
export function findMail(id: number): Promise<MailRecord | null> {
	return selectOne<MailRecord>('SELECT * FROM mails WHERE id = :id', { id });
}

/** Ids of the mails from before a moment that no longer wait. */
export async function listSettledBefore(moment: string): Promise<number[]> {
	const rows = await select<{ id: number }>(
		"SELECT id FROM mails WHERE state <> 'waiting' AND createdAt < :moment",
		{ moment }
	);
	return rows.map(({ id }) => id);
}

/** Removes mails for good; call in a transaction. */
export async function deleteMails(ids: readonly number[]): Promise<void> {
	if (ids.length > 0) await execute('DELETE FROM mails WHERE id IN (:ids)', { ids });
}
