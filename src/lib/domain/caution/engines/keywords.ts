import type { Engine } from '../../reading/reading';
import type { Caution, CautionLevel } from '../caution';
import { notUnderstood } from '../caution-from-findings';
import { splitStatements, stripComments, type Lexis } from '../split-statements';

/**
 * Engines without a grammar here: only statements whose first words leave no doubt. Locks are metadata locks
 * (MariaDB manual, Metadata Locking; MySQL manual, 10.11.4) or the Showplan engine's schema locks; what depends
 * on version, algorithm or stored code (ALTER TABLE, CREATE INDEX, CALL …) is left not understood on purpose.
 */
interface KeywordRule {
	engines: readonly Engine[];
	/** Matched against the statement without comments, white space folded. */
	words: RegExp;
	kind: string;
	level: CautionLevel;
	/** Nobody else can read or write the table meanwhile. */
	exclusive?: boolean;
	rewrites?: boolean;
	inTransaction?: boolean;
	cancel: string;
	undo: string;
	load: string;
	precheck: readonly string[];
}

const MYSQL_FAMILY: readonly Engine[] = ['mariadb', 'mysql'];
const ALL: readonly Engine[] = ['mariadb', 'mysql', 'showplan'];
const IN_TRANSACTION =
	'No long transaction is open on the table: information_schema.innodb_trx, oldest trx_started.';
const SPACE = 'Free disk space against data_length + index_length in information_schema.tables.';
const COUNTED = 'How many rows it touches: the same condition with SELECT COUNT(*).';
const COPIED = 'A backup or a copy of the rows exists and was tried.';

const RULES: readonly KeywordRule[] = [
	{
		engines: ALL,
		words: /^select\b/i,
		kind: 'select',
		level: 0,
		cancel: 'Nothing: it only reads.',
		undo: 'Nothing to undo.',
		load: 'What the query itself reads.',
		precheck: []
	},
	{
		engines: MYSQL_FAMILY,
		words: /^(show|describe|desc)\b/i,
		kind: 'show',
		level: 0,
		cancel: 'Nothing: it only reads.',
		undo: 'Nothing to undo.',
		load: 'None worth naming.',
		precheck: []
	},
	{
		engines: MYSQL_FAMILY,
		words: /^explain (?!analyze)/i,
		kind: 'explain',
		level: 0,
		cancel: 'Nothing: it only reads.',
		undo: 'Nothing to undo.',
		load: 'None: the statement is planned, not run.',
		precheck: []
	},
	{
		engines: MYSQL_FAMILY,
		words:
			/^set (session )?(sort_buffer_size|join_buffer_size|tmp_table_size|max_heap_table_size|tmp_memory_table_size|join_cache_level|optimizer_switch|read_rnd_buffer_size|lock_wait_timeout|innodb_lock_wait_timeout)\b/i,
		kind: 'set',
		level: 1,
		cancel: 'Nothing.',
		undo: 'Set it to DEFAULT, or connect again.',
		load: 'This session only; memory is taken per sort, join or temporary table.',
		precheck: ['What it could cost: the setting × connections × tables joined, against free memory.']
	},
	{
		engines: MYSQL_FAMILY,
		words: /^set (global|@@global\.)/i,
		kind: 'set-global',
		level: 2,
		cancel: 'Nothing: it is done at once.',
		undo: 'Set the old value back: note it first.',
		load: 'New sessions take it; running sessions keep their value of session variables. Lost at the next restart.',
		precheck: ['The present value: SHOW GLOBAL VARIABLES LIKE the name.']
	},
	{
		engines: MYSQL_FAMILY,
		words: /^analyze (local |no_write_to_binlog )?tables? (?!.*\b(update|drop) histogram\b)/i,
		kind: 'analyze',
		level: 2,
		cancel: 'The old statistics stay.',
		undo: 'Cannot be undone; only measured anew.',
		load: 'Reads a sample of pages (the whole table with PERSISTENT FOR ALL). Plans of every session may change at once.',
		precheck: [IN_TRANSACTION, 'Keep the present plan (EXPLAIN) to compare with.']
	},
	{
		engines: MYSQL_FAMILY,
		words: /^optimize (local |no_write_to_binlog )?tables? /i,
		kind: 'optimize',
		level: 3,
		rewrites: true,
		inTransaction: false,
		cancel: 'The old table stays as it was.',
		undo: 'Nothing to undo.',
		load: 'InnoDB rebuilds the table and analyses it: twice the space, an exclusive metadata lock at start and end behind which everybody queues.',
		precheck: [IN_TRANSACTION, SPACE]
	},
	{
		engines: MYSQL_FAMILY,
		words: /^truncate /i,
		kind: 'truncate',
		level: 3,
		exclusive: true,
		inTransaction: false,
		cancel: 'Nothing to cancel: it is done at once.',
		undo: 'Cannot be undone: it commits by itself. Only from a backup.',
		load: 'Drops and creates the table anew; refused where a foreign key refers to it.',
		precheck: [COPIED, IN_TRANSACTION]
	},
	{
		engines: MYSQL_FAMILY,
		words: /^drop table /i,
		kind: 'drop-table',
		level: 3,
		exclusive: true,
		inTransaction: false,
		cancel: 'Nothing to cancel: it is done at once.',
		undo: 'Cannot be undone: it commits by itself. Only from a backup.',
		load: 'Large files may stall the server while they are deleted.',
		precheck: [COPIED, IN_TRANSACTION]
	},
	{
		engines: ALL,
		words: /^update (?!statistics\b)(?!.*\bwhere\b)/i,
		kind: 'update-all',
		level: 3,
		cancel: 'Rolled back, which can take longer than the work.',
		undo: 'ROLLBACK before COMMIT; afterwards only from a backup.',
		load: 'No condition: every row is locked until the transaction ends. Do it in batches by key.',
		precheck: [COUNTED, COPIED]
	},
	{
		engines: ALL,
		words: /^update (?!statistics\b).*\bwhere\b/i,
		kind: 'update',
		level: 3,
		cancel: 'Rolled back, which can take longer than the work.',
		undo: 'ROLLBACK before COMMIT; afterwards only from a copy of the old rows.',
		load: 'Rows found are locked until the transaction ends.',
		precheck: [COUNTED, COPIED]
	},
	{
		engines: ALL,
		words: /^delete (?!.*\bwhere\b)/i,
		kind: 'delete-all',
		level: 3,
		cancel: 'Rolled back, which can take longer than the work.',
		undo: 'ROLLBACK before COMMIT; afterwards only from a backup.',
		load: 'No condition: every row is locked until the transaction ends. Do it in batches by key.',
		precheck: [COUNTED, COPIED]
	},
	{
		engines: ALL,
		words: /^delete .*\bwhere\b/i,
		kind: 'delete',
		level: 3,
		cancel: 'Rolled back, which can take longer than the work.',
		undo: 'ROLLBACK before COMMIT; afterwards only from a copy of the rows.',
		load: 'Rows found are locked until the transaction ends.',
		precheck: [COUNTED, COPIED]
	},
	{
		engines: MYSQL_FAMILY,
		words: /^kill query \d+$/i,
		kind: 'cancel-backend',
		level: 2,
		cancel: 'Nothing: it is done at once.',
		undo: 'Cannot be undone; the other session can run its statement again.',
		load: 'The statement is rolled back, which takes time.',
		precheck: ['It is the right one: id, user, query and time in SHOW FULL PROCESSLIST.']
	},
	{
		engines: ALL,
		words: /^kill (connection )?\d+$/i,
		kind: 'terminate-backend',
		level: 3,
		cancel: 'Nothing: it is done at once.',
		undo: 'Cannot be undone: the connection is closed and its transaction rolled back.',
		load: 'The rollback can outlast the original work.',
		precheck: ['It is the right one: id, user, query and start of its transaction.']
	},
	{
		engines: ['showplan'],
		words: /^update statistics /i,
		kind: 'analyze',
		level: 2,
		cancel: 'The old statistics stay.',
		undo: 'Cannot be undone; only measured anew.',
		load: 'Reads a sample, or the whole table WITH FULLSCAN; dependent plans are compiled anew.',
		precheck: ['How old the statistics are, and the present plan kept.']
	},
	{
		engines: ['showplan'],
		words: /^truncate table /i,
		kind: 'truncate',
		level: 3,
		exclusive: true,
		cancel: 'Nothing to cancel: it is done at once.',
		undo: 'ROLLBACK inside a transaction; otherwise only from a backup.',
		load: 'Refused where a foreign key refers to the table.',
		precheck: [COPIED]
	}
];

/** Functions that only compute, in every engine here. */
const HARMLESS =
	/^(count|sum|avg|min|max|coalesce|ifnull|nullif|round|abs|lower|upper|length|concat|substring|now|date|year|month|day|in|exists|values|and|or|not|as|over|on|using|where|from|select|join)$/i;

const EXCLUSIVE_MODE: Partial<Record<Engine, string>> = {
	mariadb: 'MDL_EXCLUSIVE',
	mysql: 'EXCLUSIVE',
	showplan: 'Sch-M'
};

/** Kinds that keep a table's definition locked until their transaction ends. */
const TABLE_HOLDERS = new Set(['analyze', 'optimize', 'update', 'update-all', 'delete', 'delete-all']);

/** `/*! … *\/` is a comment to everybody but MariaDB and MySQL, which run it. */
const HIDDEN_CODE = /\/\*M?!/;

/** Cautions by first keywords: one a statement; anything in doubt is not understood. */
export function classifyByKeywords(engine: Engine, sql: string): Caution[] {
	const lexis: Lexis = {
		hashComments: MYSQL_FAMILY.includes(engine),
		backslashEscapes: MYSQL_FAMILY.includes(engine)
	};
	return splitStatements(sql, lexis).map((statement) =>
		classify(engine, statement, stripComments(statement, lexis))
	);
}

function classify(engine: Engine, sql: string, folded: string): Caution {
	if (MYSQL_FAMILY.includes(engine) && HIDDEN_CODE.test(sql)) {
		return notUnderstood(sql, 'A comment in it is code that this engine runs.');
	}
	const found = RULES.find(({ engines, words }) => engines.includes(engine) && words.test(folded));
	if (found === undefined) {
		return notUnderstood(
			sql,
			'Only the plainest statements of this engine are known; what this one locks is not.'
		);
	}
	if (found.kind === 'select' && !isPlainRead(folded)) {
		return notUnderstood(
			sql,
			'It is a SELECT, but not certain to read only (a function, INTO, or locked rows).'
		);
	}
	return toCaution(engine, sql, folded, found);
}

function isPlainRead(folded: string): boolean {
	if (/\binto\b|\bfor (update|share)\b|\block in share mode\b/i.test(folded)) return false;
	const text = folded.replace(/'[^']*'/g, "''");
	return [...text.matchAll(/([A-Za-z_][\w.]*)\s*\(/g)].every(([, name]) => HARMLESS.test(name ?? ''));
}

function toCaution(engine: Engine, sql: string, folded: string, rule: KeywordRule): Caution {
	const exclusive = rule.exclusive === true;
	const lock = exclusive ? { mode: EXCLUSIVE_MODE[engine] ?? 'exclusive', on: lastWord(folded) } : null;
	return {
		sql,
		understood: true,
		kind: rule.kind,
		locks: lock === null ? [] : [lock],
		lock,
		blocks: { reads: exclusive, writes: exclusive, schemaChanges: exclusive || TABLE_HOLDERS.has(rule.kind) },
		rewrites: rule.rewrites === true,
		inTransaction: rule.inTransaction !== false,
		level: rule.level,
		cancel: rule.cancel,
		undo: rule.undo,
		load: rule.load,
		precheck: [...rule.precheck],
		basis: null
	};
}

function lastWord(folded: string): string {
	return /([\w.`{}]+)$/.exec(folded)?.[1] ?? 'the table';
}
