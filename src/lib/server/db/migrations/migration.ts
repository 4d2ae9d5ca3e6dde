import type { QueryInterface } from 'sequelize';

/** One numbered change of the tables, and its undo. Both run inside a transaction. */
export interface Migration {
	/** `0001-first-tables`; kept in the database, so never renamed. */
	name: string;
	up: (context: QueryInterface) => Promise<void>;
	down: (context: QueryInterface) => Promise<void>;
}

/** Runs statements one after the other. */
export async function runAll(context: QueryInterface, statements: readonly string[]): Promise<void> {
	for (const statement of statements) await context.sequelize.query(statement);
}
