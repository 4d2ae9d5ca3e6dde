import type { Role } from '$lib/domain/person/person';
import { PasswordResetModel } from '../db/models/password-reset';
import { PersonModel } from '../db/models/person';
import { SignInLinkModel } from '../db/models/sign-in-link';
import { select, selectOne, type Replacements } from '../db/query';
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
	/** null: never, or before it was kept. */
	lastSignInAt: string | null;
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

/** Who is listed: those who may sign in, those who left, or everybody. */
export interface PeopleFilter {
	active: boolean | null;
	role: Role | null;
}

/** Where a page of people begins: behind this person, in the list's order. */
export interface PersonPlace {
	hasLeft: boolean;
	name: string;
	id: number;
}

function toWhere({ active, role }: PeopleFilter): { sql: string; values: Replacements } {
	const sql = ['1'];
	if (active !== null) sql.push(`deactivatedAt IS ${active ? '' : 'NOT '}NULL`);
	if (role !== null) sql.push('role = :role');
	return { sql: sql.join(' AND '), values: role === null ? {} : { role } };
}

/** People by name, those who left last; one page of them. */
export function listPeople(
	filter: PeopleFilter,
	after: PersonPlace | null,
	limit: number
): Promise<PersonRecord[]> {
	const { sql, values } = toWhere(filter);
	const place = after ?? { hasLeft: false, name: '', id: 0 };
	return select<PersonRecord>(
		`SELECT * FROM people
		WHERE ${sql} AND (deactivatedAt IS NOT NULL, name COLLATE NOCASE, id) > (:left, :name, :id)
		ORDER BY deactivatedAt IS NOT NULL, name COLLATE NOCASE, id LIMIT :limit`,
		{ ...values, left: place.hasLeft ? 1 : 0, name: place.name, id: place.id, limit }
	);
}

/** How many people a filter leaves. */
export async function countPeople(filter: PeopleFilter): Promise<number> {
	const { sql, values } = toWhere(filter);
	const row = await selectOne<{ total: number }>(`SELECT COUNT(*) AS total FROM people WHERE ${sql}`, values);
	return row?.total ?? 0;
}

/** Whether anybody was ever added. */
export async function hasPeople(): Promise<boolean> {
	return (await selectOne('SELECT id FROM people LIMIT 1')) !== null;
}

/** How many others are administrators and can sign in: active, with a password. */
export async function countOtherAdministrators(id: number): Promise<number> {
	const row = await selectOne<{ total: number }>(
		`SELECT COUNT(*) AS total FROM people
		WHERE role = 'administrator' AND deactivatedAt IS NULL AND passwordHash IS NOT NULL AND id <> :id`,
		{ id }
	);
	return row?.total ?? 0;
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
	fields: { name?: string; passwordHash?: string; deactivatedAt?: string | null; role?: Role },
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

/** Takes back every link by which a person could set a password, mailed or handed over. */
export async function deleteLinksOf(personId: number, transaction: Transaction): Promise<void> {
	await SignInLinkModel.destroy({ where: { personId, usedAt: null }, transaction });
	await PasswordResetModel.destroy({ where: { personId, usedAt: null }, transaction });
}
