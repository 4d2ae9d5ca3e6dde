import type { Transaction } from 'sequelize';
import { database } from './connection';
import { writeTo } from './writer-queue';

export type { Transaction };

/**
 * Runs `fn` in one transaction of the current database: commits when it resolves, rolls back when it
 * throws. Writers wait for one another; called inside a transaction, it joins that one. Every query in `fn`
 * must be awaited; what has to wait for the commit goes into `transaction.afterCommit`.
 */
export function write<T>(fn: (transaction: Transaction) => Promise<T>): Promise<T> {
	return writeTo(database(), fn);
}
