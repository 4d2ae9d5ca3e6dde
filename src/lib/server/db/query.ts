import { QueryTypes } from 'sequelize';
import { database } from './connection';

/** What a bound parameter may be. A list stands for `IN (:list)`. */
export type Replacements = Record<string, string | number | null | readonly (string | number)[]>;

/**
 * The rows of a SELECT with named parameters (`WHERE service = :service`), in the caller's transaction
 * where there is one. Values are never joined into the text.
 */
export async function select<T extends object>(sql: string, replacements: Replacements = {}): Promise<T[]> {
	return database().sequelize.query<T>(sql, { type: QueryTypes.SELECT, replacements });
}

/** The first row of a SELECT; null where there is none. */
export async function selectOne<T extends object>(
	sql: string,
	replacements: Replacements = {}
): Promise<T | null> {
	const rows = await select<T>(sql, replacements);
	return rows[0] ?? null;
}

/** Runs a statement that answers no rows, with named parameters. */
export async function execute(sql: string, replacements: Replacements = {}): Promise<void> {
	await database().sequelize.query(sql, { type: QueryTypes.RAW, replacements });
}
