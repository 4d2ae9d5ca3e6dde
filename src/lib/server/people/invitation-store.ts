import { UniqueConstraintError } from 'sequelize';
import type { Person, Role } from '$lib/domain/person/person';
import { InvitationModel } from '../db/models/invitation';
import { select, selectOne } from '../db/query';
import type { Transaction } from '../db/transaction';

export interface InvitationRecord {
	id: number;
	email: string;
	role: Role;
	/** null: the system. */
	invitedBy: Person | null;
	createdAt: string;
	expiresAt: string;
	usedAt: string | null;
	revokedAt: string | null;
	revision: number;
}

type Row = Omit<InvitationRecord, 'invitedBy'> & { invitedById: number | null; inviterName: string | null };

const FROM = `SELECT i.id, i.email, i.role, i.invitedById, p.name AS inviterName, i.createdAt, i.expiresAt, i.usedAt,
	i.revokedAt, i.revision
	FROM invitations i LEFT JOIN people p ON p.id = i.invitedById`;

function toRecord({ invitedById, inviterName, ...row }: Row): InvitationRecord {
	const invitedBy =
		invitedById === null || inviterName === null ? null : { id: invitedById, name: inviterName };
	return { ...row, invitedBy };
}

/** Invitations, newest first, from before an id (null: from the newest). */
export async function listInvitations(beforeId: number | null, limit: number): Promise<InvitationRecord[]> {
	const rows = await select<Row>(
		`${FROM} WHERE (:beforeId IS NULL OR i.id < :beforeId) ORDER BY i.id DESC LIMIT :limit`,
		{ beforeId, limit }
	);
	return rows.map(toRecord);
}

/** Invitations that were neither used nor taken back, newest first; those that have run out included. */
export async function listUnanswered(): Promise<InvitationRecord[]> {
	const rows = await select<Row>(`${FROM} WHERE i.usedAt IS NULL AND i.revokedAt IS NULL ORDER BY i.id DESC`);
	return rows.map(toRecord);
}

export async function countInvitations(): Promise<number> {
	const row = await selectOne<{ total: number }>('SELECT COUNT(*) AS total FROM invitations');
	return row?.total ?? 0;
}

/** One invitation; null where there is none. */
export async function findInvitation(id: number): Promise<InvitationRecord | null> {
	const row = await selectOne<Row>(`${FROM} WHERE i.id = :id`, { id });
	return row && toRecord(row);
}

/** The invitation that a link opens now; null where it is unknown, used, taken back or has run out. */
export async function findByToken(tokenHash: string, now: string): Promise<InvitationRecord | null> {
	const row = await selectOne<Row>(
		`${FROM} WHERE i.tokenHash = :tokenHash AND i.usedAt IS NULL AND i.revokedAt IS NULL AND i.expiresAt > :now`,
		{ tokenHash, now }
	);
	return row && toRecord(row);
}

/** Adds an invitation and answers its id; null where the address has an open one. */
export async function insertInvitation(
	fields: {
		tokenHash: string;
		email: string;
		role: Role;
		invitedById: number | null;
		createdAt: string;
		expiresAt: string;
	},
	transaction: Transaction
): Promise<number | null> {
	try {
		const row = await InvitationModel.create(fields, { transaction });
		return row.id;
	} catch (error) {
		if (error instanceof UniqueConstraintError) return null;
		throw error;
	}
}

/** Changes an open invitation and counts its revision up; false where it is open no more. */
export async function changeOpen(
	id: number,
	fields: { tokenHash?: string; expiresAt?: string; usedAt?: string; revokedAt?: string },
	transaction: Transaction
): Promise<boolean> {
	const where = { id, usedAt: null, revokedAt: null };
	// First, while the condition still holds.
	await InvitationModel.increment('revision', { where, transaction });
	const [changed] = await InvitationModel.update(fields, { where, transaction });
	return changed === 1;
}
