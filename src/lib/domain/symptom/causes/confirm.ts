import type { PlanOperator } from '../../reading/operator';

/** A table as it stands in a plan. */
export interface TableName {
	schema: string | null;
	name: string;
}

/** The table that an operator reads; null: it reads none (a function, a WITH query, a join). */
export function tableOf(operator: PlanOperator): TableName | null {
	const reads: readonly PlanOperator['kind'][] = [
		'seq-scan',
		'index-scan',
		'index-only-scan',
		'bitmap-scan',
		'lookup'
	];
	if (operator.relation === null || !reads.includes(operator.kind)) return null;
	return { schema: operator.facts.schema, name: operator.relation };
}

/** A name as an SQL identifier: quoted where PostgreSQL would fold or refuse it; as it is where a plan quoted it already. */
export function quoteName(name: string): string {
	if (/^".*"$/s.test(name) || /^[a-z_][a-z0-9_$]*$/.test(name)) return name;
	return `"${name.replaceAll('"', '""')}"`;
}

/** Text as an SQL literal. */
export function quoteText(text: string): string {
	return `'${text.replaceAll("'", "''")}'`;
}

/** "public.invoice_line", quoted where needed. */
export function qualifiedName({ schema, name }: TableName): string {
	return schema === null ? quoteName(name) : `${quoteName(schema)}.${quoteName(name)}`;
}

function regclass(table: TableName): string {
	return `${quoteText(qualifiedName(table))}::regclass`;
}

/** When the table's statistics were last gathered, and how much has changed since (manual, pg_stat_all_tables). */
export function statisticsAge(table: TableName): string {
	return `SELECT relname, n_live_tup, n_mod_since_analyze, last_analyze, last_autoanalyze FROM pg_stat_all_tables WHERE relid = ${regclass(table)};`;
}

/** What the planner knows of the columns named (manual, pg_stats). */
export function columnStatistics(table: TableName, columns: readonly string[]): string {
	const unquoted = columns.map((column) =>
		quoteText(column.replace(/^"(.*)"$/s, '$1').replaceAll('""', '"'))
	);
	const which = unquoted.length === 0 ? '' : ` AND attname IN (${unquoted.join(', ')})`;
	const schema = table.schema === null ? '' : ` AND schemaname = ${quoteText(table.schema)}`;
	return `SELECT attname, n_distinct, null_frac, most_common_vals, most_common_freqs, correlation FROM pg_stats WHERE tablename = ${quoteText(table.name.replace(/^"(.*)"$/s, '$1'))}${schema}${which};`;
}

/** Extended statistics that exist (manual, pg_statistic_ext). */
export function extendedStatistics(table: TableName): string {
	return `SELECT stxname, stxkeys, stxkind FROM pg_statistic_ext WHERE stxrelid = ${regclass(table)};`;
}

/** The table's indexes and whether they are used (manual, pg_index, pg_stat_all_indexes). */
export function indexesOf(table: TableName): string {
	return `SELECT pg_get_indexdef(i.indexrelid) AS index, i.indisvalid, s.idx_scan FROM pg_index i LEFT JOIN pg_stat_all_indexes s USING (indexrelid) WHERE i.indrelid = ${regclass(table)};`;
}

/** The types of the table's columns. */
export function columnTypes(table: TableName): string {
	return `SELECT attname, format_type(atttypid, atttypmod) AS type FROM pg_attribute WHERE attrelid = ${regclass(table)} AND attnum > 0 AND NOT attisdropped;`;
}

/** Size, live and dead rows, last vacuum. */
export function vacuumState(table: TableName): string {
	return `SELECT s.relname, pg_size_pretty(pg_relation_size(s.relid)) AS size, c.relpages, c.relallvisible, s.n_live_tup, s.n_dead_tup, s.last_vacuum, s.last_autovacuum FROM pg_stat_all_tables s JOIN pg_class c ON c.oid = s.relid WHERE s.relid = ${regclass(table)};`;
}

/** Blocks of the table that came from the cache and from outside since the counters began. */
export function cacheState(table: TableName): string {
	return `SELECT relname, heap_blks_hit, heap_blks_read, idx_blks_hit, idx_blks_read FROM pg_statio_all_tables WHERE relid = ${regclass(table)};`;
}

/** Settings with their values and where they were made. */
export function settingsNamed(names: readonly string[]): string {
	return `SELECT name, setting, unit, source FROM pg_settings WHERE name IN (${names.map(quoteText).join(', ')});`;
}
