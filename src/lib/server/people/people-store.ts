import type { Role } from '$lib/domain/person/person';
import { PersonModel } from '../db/models/person';
import { SignInLinkModel } from '../db/models/sign-in-link';
import { select, selectOne } from '../db/query';
import type { Transaction } from '../db/transaction';

export interface PersonRecord {
	id: number;
	name: string;
	email: string;
	role: Role;
	passwordHash: string | null;
	createdAt: string;
	deactivatedAt: string | null;
	revision: number;
}

/** The person of an address (lower case); null where there is none. */
export function findByEmail(email: string): Promise<PersonRecord | null> {
	return selectOne<PersonRecord>('SELECT * FROM people WHERE email = :email', { email });
}

/** The person of an id; null where there is none. */
export function findById(id: number): Promise<PersonRecord | null> {
	return selectOne<PersonRecord>('SELECT * FROM people WHERE id = :id', { id });
}

/** Everybody by name, those who left last. */
export function listAll(): Promise<PersonRecord[]> {
	return select<PersonRecord>(
		'SELECT * FROM people ORDER BY deactivatedAt IS NOT NULL, name COLLATE NOCASE, id'
	);
}

/** Adds a person; answers the id. */
export async function insertPerson(
	fields: { name: string; email: string; role: Role; passwordHash: string | null; createdAt: string },
	transaction: Transaction
): Promise<number> {
	const row = await PersonModel.create({ ...fields, revision: 1 }, { transaction });
	return row.id;
}

/** Changes fields of a person and counts the revision up. */
export async function updatePerson(
	id: number,
	fields: { passwordHash?: string; deactivatedAt?: string | null; role?: Role },
	transaction: Transaction
): Promise<void> {
	await PersonModel.update(fields, { where: { id }, transaction });
	await PersonModel.increment('revision', { where: { id }, transaction });
}

/** Adds a link; those that the person had before are taken back. */
export async function replaceLink(
	link: { tokenHash: string; personId: number; expiresAt: string },
	transaction: Transaction
): Promise<void> {
	await SignInLinkModel.destroy({ where: { personId: link.personId }, transaction });
	await SignInLinkModel.create(link, { transaction });
}

/** Whose link it is, if it is unused, not expired and the person is active; else null. */
export function findLinkOwner(tokenHash: string, now: string): Promise<PersonRecord | null> {
	return selectOne<PersonRecord>(
		`SELECT people.* FROM signInLinks JOIN people ON people.id = signInLinks.personId
		WHERE tokenHash = :tokenHash AND usedAt IS NULL AND expiresAt > :now AND deactivatedAt IS NULL`,
		{ tokenHash, now }
	);
}

/** Marks a link as used; false where somebody was quicker. */
export async function useLink(tokenHash: string, usedAt: string, transaction: Transaction): Promise<boolean> {
	const [changed] = await SignInLinkModel.update(
		{ usedAt },
		{ where: { tokenHash, usedAt: null }, transaction }
	);
	return changed === 1;
}
