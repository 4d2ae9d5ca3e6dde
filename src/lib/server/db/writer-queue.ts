import { Transaction } from 'sequelize';
import { currentTransaction } from './cls';
import type { Database } from './connection';

/**
 * Runs `fn` in one transaction of the given database, after all that asked before it. SQLite takes one
 * writer at a time; without the queue, writers would wait for its lock inside libuv's few threads, and the
 * one that holds it could not get a thread to commit. Called inside a transaction, it joins that one.
 * Every query in `fn` must be awaited.
 */
export function writeTo<T>(db: Database, fn: (transaction: Transaction) => Promise<T>): Promise<T> {
	const joined = currentTransaction();
	if (joined) return fn(joined);
	const run = () => db.sequelize.transaction({ type: Transaction.TYPES.IMMEDIATE }, fn);
	const result = db.lastWrite.then(run, run);
	// The next in the queue runs whatever became of this one; its own caller gets the failure.
	db.lastWrite = result.then(
		() => undefined,
		() => undefined
	);
	return result;
}
