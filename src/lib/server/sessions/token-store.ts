import type { Role } from '$lib/domain/person/person';
import { TokenModel } from '../db/models/token';
import { select, selectOne } from '../db/query';
import { write, type Transaction } from '../db/transaction';

export interface TokenRecord {
	id: number;
	personId: number;
	name: string;
	role: Role;
	createdAt: string;
	expiresAt: string;
	lastUsedAt: string | null;
	revokedAt: string | null;
}

const COLUMNS =
	'tokens.id, personId, tokens.name, tokens.role, tokens.createdAt, expiresAt, lastUsedAt, revokedAt';

/** A token that opens now, with its active owner; null where it is unknown, expired or revoked. */
export function findToken(
	tokenHash: string,
	now: string
): Promise<(TokenRecord & { ownerName: string; ownerRole: Role }) | null> {
	return selectOne(
		`SELECT ${COLUMNS}, people.name AS ownerName, people.role AS ownerRole
		FROM tokens JOIN people ON people.id = tokens.personId
		WHERE tokenHash = :tokenHash AND expiresAt > :now AND revokedAt IS NULL AND deactivatedAt IS NULL`,
		{ tokenHash, now }
	);
}

/** A person's tokens, newest first, those without use any more included. */
export function listTokens(personId: number): Promise<TokenRecord[]> {
	return select<TokenRecord>(`SELECT ${COLUMNS} FROM tokens WHERE personId = :personId ORDER BY id DESC`, {
		personId
	});
}

/** Adds a token; answers its id. */
export async function insertToken(
	fields: {
		personId: number;
		name: string;
		tokenHash: string;
		role: Role;
		createdAt: string;
		expiresAt: string;
	},
	transaction: Transaction
): Promise<number> {
	const row = await TokenModel.create(fields, { transaction });
	return row.id;
}

export function setLastUsed(id: number, lastUsedAt: string): Promise<unknown> {
	return write((transaction) => TokenModel.update({ lastUsedAt }, { where: { id }, transaction }));
}

/** One token, without use any more included; null where there is none. */
export function findTokenById(id: number): Promise<TokenRecord | null> {
	return selectOne<TokenRecord>(`SELECT ${COLUMNS} FROM tokens WHERE id = :id`, { id });
}

/** Tokens of a person, newest first, from before an id (null: from the newest). */
export function listTokenPage(
	personId: number,
	beforeId: number | null,
	limit: number
): Promise<TokenRecord[]> {
	return select<TokenRecord>(
		`SELECT ${COLUMNS} FROM tokens
		WHERE personId = :personId AND (:beforeId IS NULL OR id < :beforeId)
		ORDER BY id DESC LIMIT :limit`,
		{ personId, beforeId, limit }
	);
}

/** How many tokens a person has. */
export async function countTokens(personId: number): Promise<number> {
	const row = await selectOne<{ total: number }>(
		'SELECT COUNT(*) AS total FROM tokens WHERE personId = :personId',
		{ personId }
	);
	return row?.total ?? 0;
}

/** Takes back one token; false where it was taken back before. */
export async function revokeToken(id: number, revokedAt: string, transaction: Transaction): Promise<boolean> {
	const [changed] = await TokenModel.update({ revokedAt }, { where: { id, revokedAt: null }, transaction });
	return changed === 1;
}

/** Takes back every token of a person. */
export async function revokeTokensOf(
	personId: number,
	revokedAt: string,
	transaction: Transaction
): Promise<void> {
	await TokenModel.update({ revokedAt }, { where: { personId, revokedAt: null }, transaction });
}
