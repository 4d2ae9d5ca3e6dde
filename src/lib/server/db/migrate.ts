import type { QueryInterface } from 'sequelize';
import { SequelizeStorage, Umzug } from 'umzug';
import type { Database } from './connection';
import { MIGRATIONS } from './migrations/migrations';
import { writeTo } from './writer-queue';

const TABLE = 'migrations';

function umzugOf(db: Database): Umzug<QueryInterface> {
	return new Umzug({
		migrations: MIGRATIONS.map(({ name, up, down }) => ({
			name,
			up: ({ context }: { context: QueryInterface }) => up(context),
			down: ({ context }: { context: QueryInterface }) => down(context)
		})),
		context: db.sequelize.getQueryInterface(),
		storage: new SequelizeStorage({ sequelize: db.sequelize, modelName: TABLE, tableName: TABLE }),
		logger: undefined
	});
}

/** Brings the tables up to date in one transaction: all of it or nothing. Answers the names applied. */
export function migrateUp(db: Database): Promise<string[]> {
	return writeTo(db, async () => {
		const done = await umzugOf(db).up();
		return done.map((migration) => migration.name);
	});
}

/** Undoes migrations down to and without `keep` (null: all of them), newest first. Answers the names undone. */
export function migrateDown(db: Database, keep: string | null): Promise<string[]> {
	return writeTo(db, async () => {
		const umzug = umzugOf(db);
		const executed = await umzug.executed();
		const undone: string[] = [];
		for (const { name } of executed.reverse()) {
			if (name === keep) break;
			await umzug.down();
			undone.push(name);
		}
		return undone;
	});
}

/** Name of the newest migration applied; null on an empty database. */
export async function readSchema(db: Database): Promise<string | null> {
	const executed = await umzugOf(db).executed();
	return executed.at(-1)?.name ?? null;
}

/** Names of the migrations that wait to be applied. */
export async function listPendingMigrations(db: Database): Promise<string[]> {
	return (await umzugOf(db).pending()).map((migration) => migration.name);
}
