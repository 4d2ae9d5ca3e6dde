import { QueryTypes } from 'sequelize';
import { database } from './connection';

/** What a bound parameter may be. A list stands for `IN (:list)`. */
export type Replacements = Record<string, string | number | null | readonly (string | number)[]>;

/**
 * Parameters without null characters, at which SQLite would end the statement in the middle of a text. The sign
 * for "unreadable" stands in their place: such a text is looked for and not found.
 */
function toReadable(replacements: Replacements): Replacements {
	const clean = <T>(value: T) =>
		typeof value === 'string' ? (value.replaceAll('\0', '\ufffd') as T & string) : value;
	return Object.fromEntries(
		Object.entries(replacements).map(([name, value]) => [
			name,
			value !== null && typeof value === 'object' ? value.map(clean) : clean(value)
		])
	);
}

/**
 * The rows of a SELECT with named parameters (`WHERE service = :service`), in the caller's transaction
 * where there is one. Values are escaped, never joined into the text as they are.
 */
export async function select<T extends object>(sql: string, replacements: Replacements = {}): Promise<T[]> {
	return database().sequelize.query<T>(sql, {
		type: QueryTypes.SELECT,
		replacements: toReadable(replacements)
	});
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
	await database().sequelize.query(sql, {
		type: QueryTypes.RAW,
		replacements: toReadable(replacements)
	});
}
