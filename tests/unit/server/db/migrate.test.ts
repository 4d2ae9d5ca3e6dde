import { afterEach, beforeEach, describe, expect, it } from 'vitest';
import type { Database } from '$lib/server/db/connection';
import { closeDatabase, openDatabase } from '$lib/server/db/connection';
import { migrateDown, migrateUp, readSchema } from '$lib/server/db/migrate';
import { MIGRATIONS } from '$lib/server/db/migrations/migrations';
import { EntryModel } from '$lib/server/db/models/entry';
import { execute, select } from '$lib/server/db/query';
import { write } from '$lib/server/db/transaction';
import { dropDatabase, makeDatabase } from '../../../fixtures/database';
import { makeIncident } from '../../../fixtures/factories/incident';
import { makePerson } from '../../../fixtures/factories/person';

const NEWEST = MIGRATIONS.at(-1)?.name ?? '';
const AT = '2026-03-02T02:10:00.000Z';

let db: Database;

beforeEach(async () => {
	db = await makeDatabase();
});
afterEach(() => dropDatabase(db));

/** Tables and indexes as SQLite describes them, without what the full-text index keeps for itself. */
async function readTables(): Promise<string[]> {
	const rows = await select<{ sql: string }>(
		"SELECT sql FROM sqlite_master WHERE sql IS NOT NULL AND name <> 'migrations' AND name NOT LIKE 'sqlite%' ORDER BY type, name"
	);
	return rows.map((row) => row.sql);
}

async function fill(): Promise<void> {
	const person = await makePerson();
	const incidentNumber = await makeIncident({ ownerId: person.id });
	await write(() =>
		EntryModel.create({
			incidentNumber,
			at: AT,
			text: 'The report has been running for an hour.',
			authorId: person.id,
			kind: 'note',
			revision: 1,
			createdAt: AT,
			updatedAt: AT
		})
	);
}

describe('migrateUp', () => {
	it('does nothing to a database that is up to date', async () => {
		expect(await migrateUp(db)).toEqual([]);
		expect(await readSchema(db)).toBe(NEWEST);
	});

	it('keeps what a filled database holds', async () => {
		await fill();
		await closeDatabase();
		db = await openDatabase(db.dataDir);
		expect(await select('SELECT text FROM entries')).toHaveLength(1);
	});
});

describe('migrateDown', () => {
	it('undoes every migration on a filled database, and up makes the same tables again', async () => {
		const before = await readTables();
		await fill();
		const undone = await migrateDown(db, null);
		expect(undone).toEqual(MIGRATIONS.map((migration) => migration.name).reverse());
		expect(await readTables()).toEqual([]);
		expect(await migrateUp(db)).toEqual(MIGRATIONS.map((migration) => migration.name));
		expect(await readTables()).toEqual(before);
	});

	it.each(MIGRATIONS.slice(0, -1).map(({ name }) => name))(
		'undoes what came after %s and keeps the rows',
		async (name) => {
			await fill();
			await migrateDown(db, name);
			expect(await readSchema(db)).toBe(name);
			expect(await select('SELECT title FROM incidents')).toHaveLength(1);
			await migrateUp(db);
			expect(await select('SELECT title FROM incidents')).toHaveLength(1);
			expect(await select('PRAGMA foreign_key_check')).toEqual([]);
		}
	);
});

describe('the tables', () => {
	it('refuse a row that points at nobody', async () => {
		await expect(write(() => makeIncident({ ownerId: 4711 }))).rejects.toThrow(/FOREIGN KEY/);
	});

	it('refuse a role, a state and a severity that are none', async () => {
		await makePerson();
		const number = await makeIncident();
		for (const change of [
			"UPDATE people SET role = 'owner'",
			`UPDATE incidents SET state = 'closed' WHERE number = ${number}`,
			`UPDATE incidents SET severity = 5 WHERE number = ${number}`
		]) {
			await expect(execute(change)).rejects.toThrow();
		}
	});

	it('never give a number twice', async () => {
		const first = await makeIncident();
		await execute('DELETE FROM incidents');
		expect(await makeIncident()).toBeGreaterThan(first);
	});
});
