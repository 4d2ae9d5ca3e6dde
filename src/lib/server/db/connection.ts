import { mkdirSync } from 'node:fs';
import path from 'node:path';
import { Sequelize } from 'sequelize';
import sqlite3 from 'sqlite3';
import './cls';
import { defineModels } from './models/define-models';
import { migrateUp } from './migrate';

/** An open data folder. */
export interface Database {
	sequelize: Sequelize;
	dataDir: string;
	/** End of the queue of writers: each write waits for the one before (transaction.ts). */
	lastWrite: Promise<unknown>;
}

export const DATABASE_FILE = 'catchwater.sqlite';

/** How long a connection waits for a lock that another process holds. */
const BUSY_TIMEOUT_MS = 7000;

/** Settings that SQLite keeps per connection, and Sequelize opens one for each transaction. */
class TunedConnection extends sqlite3.Database {
	constructor(file: string, mode: number, callback: (error: Error | null) => void) {
		super(file, mode, callback);
		this.configure('busyTimeout', BUSY_TIMEOUT_MS);
		// Safe with WAL: an application's crash loses nothing that was acknowledged.
		this.run('PRAGMA synchronous=NORMAL');
	}
}

let current: Database | null = null;

/**
 * Opens the data folder's database (made where missing) and makes it the current one; brings its tables up
 * to date unless told not to. A database that was open before is closed.
 */
export async function openDatabase(dataDir: string, options: { migrate?: boolean } = {}): Promise<Database> {
	await closeDatabase();
	mkdirSync(dataDir, { recursive: true, mode: 0o700 });
	const sequelize = new Sequelize({
		dialect: 'sqlite',
		dialectModule: { ...sqlite3, Database: TunedConnection },
		storage: path.join(dataDir, DATABASE_FILE),
		logging: false,
		define: { timestamps: false, freezeTableName: true }
	});
	await sequelize.query('PRAGMA journal_mode=WAL');
	defineModels(sequelize);
	current = { sequelize, dataDir, lastWrite: Promise.resolve() };
	if (options.migrate !== false) await migrateUp(current);
	return current;
}

/** The open database. Throws when none is: opening it is the start's task, not the caller's. */
export function database(): Database {
	if (!current) throw new Error('No database is open.');
	return current;
}

/** Waits for the writes under way and closes the current database; nothing to do where none is open. */
export async function closeDatabase(): Promise<void> {
	const closing = current;
	current = null;
	if (!closing) return;
	await closing.lastWrite;
	await closing.sequelize.close();
}
