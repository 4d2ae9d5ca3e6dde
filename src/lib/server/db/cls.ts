import { AsyncLocalStorage, AsyncResource } from 'node:async_hooks';
import { Sequelize, type Transaction } from 'sequelize';

/**
 * Hands the running transaction to every query made inside it. Sequelize's SQLite has one connection for
 * all that runs outside a transaction: a query that forgot `{ transaction }` would wait there for the
 * lock that its own transaction holds.
 */
const storage = new AsyncLocalStorage<Map<string, unknown>>();

Sequelize.useCLS({
	run: (fn: (context: Map<string, unknown>) => unknown) => {
		const context = new Map(storage.getStore() ?? []);
		return storage.run(context, () => fn(context));
	},
	get: (key: string) => storage.getStore()?.get(key),
	set: (key: string, value: unknown) => storage.getStore()?.set(key, value),
	bind: (fn: () => void) => AsyncResource.bind(fn)
});

/** The transaction that the caller runs in; null outside one, or when it has ended. */
export function currentTransaction(): Transaction | null {
	const transaction = storage.getStore()?.get('transaction') as
		(Transaction & { finished?: string }) | null | undefined;
	return transaction && transaction.finished === undefined ? transaction : null;
}
