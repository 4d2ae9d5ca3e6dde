import { Op } from 'sequelize';
import { PasswordResetModel } from '../db/models/password-reset';
import { selectOne } from '../db/query';
import type { Transaction } from '../db/transaction';
import type { PersonRecord } from './people-store';

/** How many links a person was mailed since a moment. */
export async function countSince(personId: number, since: string): Promise<number> {
	const row = await selectOne<{ total: number }>(
		'SELECT COUNT(*) AS total FROM passwordResets WHERE personId = :personId AND createdAt > :since',
		{ personId, since }
	);
	return row?.total ?? 0;
}

/** Adds a link. Those mailed before stay good: whoever asks in somebody's name takes nothing from them. */
export async function insertReset(
	fields: { tokenHash: string; personId: number; createdAt: string; expiresAt: string },
	transaction: Transaction
): Promise<void> {
	await PasswordResetModel.create(fields, { transaction });
}

/** Whose link it is, if it is unused, not expired and the person is active; else null. */
export function findResetOwner(tokenHash: string, now: string): Promise<PersonRecord | null> {
	return selectOne<PersonRecord>(
		`SELECT people.* FROM passwordResets JOIN people ON people.id = passwordResets.personId
		WHERE tokenHash = :tokenHash AND usedAt IS NULL AND expiresAt > :now AND deactivatedAt IS NULL`,
		{ tokenHash, now }
	);
}

/** Marks a link as used; false where somebody was quicker. */
export async function useReset(
	tokenHash: string,
	usedAt: string,
	transaction: Transaction
): Promise<boolean> {
	const [changed] = await PasswordResetModel.update(
		{ usedAt },
		{ where: { tokenHash, usedAt: null }, transaction }
	);
	return changed === 1;
}

/** Removes links that ran out before a moment. */
export async function deleteResetsBefore(moment: string, transaction: Transaction): Promise<void> {
	await PasswordResetModel.destroy({ where: { expiresAt: { [Op.lt]: moment } }, transaction });
}
