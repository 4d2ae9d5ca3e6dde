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

/** Takes back one token of a person; false where it is not theirs or was taken back before. */
export async function revokeToken(
	personId: number,
	id: number,
	revokedAt: string,
	transaction: Transaction
): Promise<boolean> {
	const [changed] = await TokenModel.update(
		{ revokedAt },
		{ where: { id, personId, revokedAt: null }, transaction }
	);
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
