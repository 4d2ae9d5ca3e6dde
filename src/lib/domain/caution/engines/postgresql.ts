import type { LockMode } from '../lock-modes';
import type { StatementRule } from './rule';

/**
 * PostgreSQL's maintenance and data statements: which table-level lock each takes on what, what it costs, what
 * it leaves behind when cancelled and how it is undone. Sources: PostgreSQL manual, 13.3 Explicit Locking, and
 * the page of the command named in `section`; the locks and the refusals inside a transaction block are checked
 * against a running server (tests/unit/domain/caution/postgresql-locks.test.ts). This file is a table of data.
 */
export type PostgresThing =
	| 'table'
	| 'index'
	| 'indexes'
	| 'table-of-index'
	| 'referenced'
	| 'referenced-by-constraint'
	| 'partition'
	| 'view'
	| 'source'
	/** Made by the statement: nobody else can see it yet, so nobody waits. */
	| 'new';

/** What to look at first; texts in POSTGRES_CHECKS. */
export type PostgresCheck =
	| 'old-transactions'
	| 'free-space'
	| 'lock-queue'
	| 'replicas'
	| 'invalid-indexes'
	| 'index-use'
	| 'statistics-age'
	| 'rehearse'
	| 'lock-timeout'
	| 'row-count'
	| 'backup'
	| 'dependants'
	| 'saved-plan'
	| 'setting-source'
	| 'role-settings'
	| 'memory-exposure'
	| 'right-backend'
	| 'save-counters'
	| 'unique-index';

export const POSTGRES_CHECKS: Record<PostgresCheck, string> = {
	'old-transactions':
		'No old transaction is open, not even an idle one: select pid, now() - xact_start as age, state, left(query, 60) from pg_stat_activity where xact_start is not null order by 2 desc; also pg_prepared_xacts.',
	'free-space':
		"Free disk space against select pg_size_pretty(pg_table_size('{table}')), pg_size_pretty(pg_indexes_size('{table}')).",
	'lock-queue':
		"Nobody holds or wants a lock in the way: select pid, mode, granted from pg_locks where relation = '{table}'::regclass.",
	replicas:
		'Replicas keep up: select application_name, replay_lag, pg_wal_lsn_diff(sent_lsn, replay_lsn) from pg_stat_replication; and the WAL that replication slots keep.',
	'invalid-indexes':
		'No invalid index is left from an earlier try: select indexrelid::regclass from pg_index where not indisvalid.',
	'index-use':
		"The index isn't used: idx_scan in pg_stat_user_indexes on every replica too, and pg_constraint.conindid for constraints that need it.",
	'statistics-age':
		"How old the statistics are: select n_live_tup, n_dead_tup, n_mod_since_analyze, last_analyze, last_autoanalyze from pg_stat_user_tables where relid = '{table}'::regclass.",
	rehearse:
		"Whether it rewrites: on a copy, compare pg_relation_filenode('{table}') before and after inside a transaction that is rolled back.",
	'lock-timeout':
		"Set lock_timeout in this session (such as '3s') and try again later rather than let everybody queue behind a waiting request.",
	'row-count': 'How many rows it touches: the same condition with select count(*).',
	backup: 'A backup or a copy of the rows exists and was tried.',
	dependants: 'What depends on it: views, foreign keys, functions, jobs (pg_depend, and the code).',
	'saved-plan': 'Keep the present plan (explain), so that a plan that turns worse can be compared.',
	'setting-source':
		"Where the value comes from and whether a restart is needed: select name, setting, source, context, pending_restart from pg_settings where name = '{setting}'.",
	'role-settings': 'What is set already: select * from pg_db_role_setting.',
	'memory-exposure':
		'What it could cost in the worst case: sessions × nodes × (workers + 1) × the setting, against free memory.',
	'right-backend': 'It is the right process: pid, user, query and its start in pg_stat_activity.',
	'save-counters': 'Save the counters first: they are evidence, and autovacuum works by them.',
	'unique-index': 'The view has a unique index over plain columns without a condition.'
};

/** A statement kind in PostgreSQL's table. */
export type PostgresRule = StatementRule<LockMode, PostgresThing, PostgresCheck>;

const NOTHING_LEFT = 'Nothing: the transaction is rolled back.';
const NO_LOAD = 'None worth naming.';
const SHORT_ONCE_GRANTED =
	'Short once the lock is granted, but while it waits every new statement on the table waits behind it.';
const ALTER = 'SQL commands, ALTER TABLE; 13.3 Explicit Locking';

/** Base of what most rows share; each row says what differs. */
function rule(row: Partial<PostgresRule> & Pick<PostgresRule, 'undo' | 'section' | 'level'>): PostgresRule {
	return {
		locks: [],
		rewrites: false,
		inTransaction: true,
		cancel: NOTHING_LEFT,
		load: NO_LOAD,
		precheck: [],
		...row
	};
}

/** ALTER TABLE forms that take AccessExclusiveLock for a moment. */
function brief(row: Partial<PostgresRule> & Pick<PostgresRule, 'undo'>): PostgresRule {
	return rule({
		locks: [['AccessExclusiveLock', 'table']],
		level: 3,
		load: SHORT_ONCE_GRANTED,
		precheck: ['old-transactions', 'lock-timeout'],
		section: ALTER,
		...row
	});
}

/** ALTER TABLE forms that write the table anew under AccessExclusiveLock. */
function rewriting(row: Partial<PostgresRule> & Pick<PostgresRule, 'undo'>): PostgresRule {
	return brief({
		rewrites: true,
		load: 'Writes the table and its indexes anew while nobody can read it: twice the space until commit, WAL of the new size, replica lag.',
		precheck: ['free-space', 'rehearse', 'replicas', 'old-transactions', 'lock-timeout'],
		...row
	});
}

/** ALTER TABLE forms beside which reads and writes go on. */
function gentle(row: Partial<PostgresRule> & Pick<PostgresRule, 'undo'>): PostgresRule {
	return rule({ locks: [['ShareUpdateExclusiveLock', 'table']], level: 2, section: ALTER, ...row });
}

const READ_CANCEL = 'Nothing: it only reads.';
const READ_UNDO = 'Nothing to undo.';

export const POSTGRES_RULES = {
	select: rule({
		locks: [['AccessShareLock', 'source']],
		level: 0,
		cancel: READ_CANCEL,
		undo: READ_UNDO,
		load: 'What the query itself reads. Keep it short: an open transaction makes index builds and ALTER TABLE wait.',
		section: 'SQL commands, SELECT; 13.3 Explicit Locking'
	}),
	'select-for-update': rule({
		locks: [
			['RowShareLock', 'table'],
			['AccessShareLock', 'source']
		],
		level: 2,
		cancel: 'Nothing: the row locks end with the transaction.',
		undo: 'ROLLBACK or COMMIT: the row locks end with the transaction.',
		load: 'Rows found are locked until the transaction ends: others who write them wait.',
		precheck: ['row-count'],
		section: 'SQL commands, SELECT (The Locking Clause); 13.3.2 Row-Level Locks'
	}),
	explain: rule({
		locks: [['AccessShareLock', 'source']],
		level: 0,
		cancel: READ_CANCEL,
		undo: READ_UNDO,
		load: 'None: the statement is planned, not run.',
		section: 'SQL commands, EXPLAIN'
	}),
	show: rule({ level: 0, cancel: READ_CANCEL, undo: READ_UNDO, section: 'SQL commands, SHOW' }),
	'copy-to': rule({
		locks: [['AccessShareLock', 'source']],
		level: 0,
		cancel: 'Nothing in the database; a part of the output may have been written.',
		undo: READ_UNDO,
		load: 'Reads everything it copies.',
		section: 'SQL commands, COPY'
	}),

	set: rule({
		level: 1,
		cancel: 'Nothing.',
		undo: 'RESET {setting};',
		load: 'This session only. Behind a pooler that hands sessions on, the next client inherits it: use SET LOCAL in a transaction there.',
		precheck: ['memory-exposure'],
		section: 'SQL commands, SET'
	}),
	'set-local': rule({
		level: 1,
		cancel: 'Nothing.',
		undo: 'Ends by itself with the transaction.',
		load: 'This transaction only; outside a transaction block it does nothing but warn.',
		precheck: ['memory-exposure'],
		section: 'SQL commands, SET'
	}),
	reset: rule({
		level: 1,
		cancel: 'Nothing.',
		undo: 'SET {setting} to the value it had.',
		load: 'This session only.',
		section: 'SQL commands, RESET'
	}),
	discard: rule({
		level: 1,
		inTransaction: false,
		cancel: 'Nothing.',
		undo: 'Cannot be undone: temporary tables, prepared statements and settings of this session are gone.',
		load: 'This session only.',
		section: 'SQL commands, DISCARD'
	}),
	transaction: rule({
		level: 1,
		cancel: 'An open transaction keeps its locks until it ends.',
		undo: 'ROLLBACK before COMMIT; after COMMIT nothing.',
		load: 'Locks are held until the transaction ends, not the statement.',
		section: 'SQL commands, BEGIN, COMMIT, ROLLBACK; 13.3 Explicit Locking'
	}),
	'prepare-transaction': rule({
		level: 3,
		cancel: 'Nothing: it is done at once.',
		undo: 'ROLLBACK PREPARED the transaction.',
		load: 'The transaction goes on without its session: it keeps its locks, also over a restart, and keeps VACUUM from cleaning up until somebody ends it.',
		precheck: ['old-transactions'],
		section: 'SQL commands, PREPARE TRANSACTION'
	}),
	'end-prepared-transaction': rule({
		level: 3,
		inTransaction: false,
		cancel: 'Nothing: it is done at once.',
		undo: 'Cannot be undone: the transaction is over, with what it did or without.',
		load: 'Its locks are given back.',
		precheck: ['old-transactions'],
		section: 'SQL commands, COMMIT PREPARED, ROLLBACK PREPARED'
	}),
	prepare: rule({
		level: 1,
		cancel: 'Nothing.',
		undo: 'DEALLOCATE the statement.',
		load: 'This session only; nothing runs until it is executed.',
		section: 'SQL commands, PREPARE'
	}),
	deallocate: rule({
		level: 1,
		cancel: 'Nothing.',
		undo: 'PREPARE it again.',
		load: 'This session only.',
		section: 'SQL commands, DEALLOCATE'
	}),

	analyze: rule({
		locks: [['ShareUpdateExclusiveLock', 'table']],
		level: 2,
		cancel: 'The old statistics stay.',
		undo: 'Cannot be undone; only measured anew.',
		load: 'Reads a sample of about 300 rows for each point of the statistics target (30,000 by default). Plans of every session may change at once. Other maintenance on the table waits.',
		precheck: ['statistics-age', 'saved-plan'],
		section: 'SQL commands, ANALYZE; 13.3 Explicit Locking'
	}),
	vacuum: rule({
		locks: [['ShareUpdateExclusiveLock', 'table']],
		level: 2,
		inTransaction: false,
		cancel: 'Safe: the work done so far stays.',
		undo: 'Nothing to undo.',
		load: 'I/O and WAL. At the end it tries for a moment to cut empty pages off under ACCESS EXCLUSIVE; on a replica that can cancel queries: VACUUM (TRUNCATE off) leaves it out.',
		precheck: ['old-transactions', 'statistics-age'],
		section: 'SQL commands, VACUUM; 13.3 Explicit Locking'
	}),
	'vacuum-freeze': rule({
		locks: [['ShareUpdateExclusiveLock', 'table']],
		level: 2,
		inTransaction: false,
		cancel: 'Safe: the work done so far stays.',
		undo: 'Nothing to undo.',
		load: 'Rewrites many pages in place: heavy WAL and replica lag.',
		precheck: ['replicas', 'old-transactions'],
		section: 'SQL commands, VACUUM; Routine Vacuuming'
	}),
	'vacuum-full': rule({
		locks: [['AccessExclusiveLock', 'table']],
		level: 3,
		rewrites: true,
		inTransaction: false,
		cancel: 'The old table stays as it was.',
		undo: 'Nothing to undo; the space is given back.',
		load: 'Writes a full new copy of the table and its indexes: needs that much free space, writes that much WAL, and nobody can read the table meanwhile.',
		precheck: ['free-space', 'replicas', 'old-transactions', 'lock-timeout'],
		section: 'SQL commands, VACUUM; 13.3 Explicit Locking'
	}),
	cluster: rule({
		locks: [
			['AccessExclusiveLock', 'table'],
			['AccessExclusiveLock', 'index']
		],
		level: 3,
		rewrites: true,
		cancel: 'The old table stays as it was.',
		undo: 'Nothing to undo; the old order is gone.',
		load: 'As VACUUM FULL, and a sort or reads in index order: free space for table and indexes, WAL of that size, nobody can read meanwhile.',
		precheck: ['free-space', 'replicas', 'old-transactions', 'lock-timeout'],
		section: 'SQL commands, CLUSTER; 13.3 Explicit Locking'
	}),
	'cluster-all': rule({
		locks: [['AccessExclusiveLock', 'table']],
		level: 3,
		rewrites: true,
		inTransaction: false,
		cancel: 'Tables done so far stay done.',
		undo: 'Nothing to undo; the old order is gone.',
		load: 'Rewrites every table that was ever clustered, one after the other.',
		precheck: ['free-space', 'replicas', 'old-transactions'],
		section: 'SQL commands, CLUSTER'
	}),

	'create-index': rule({
		locks: [['ShareLock', 'table']],
		level: 3,
		undo: 'DROP INDEX {index};',
		load: 'Reads the table, sorts in maintenance_work_mem (temporary files beyond it), writes WAL of the index size. Writes to the table wait until it is done.',
		precheck: ['old-transactions', 'free-space', 'replicas'],
		section: 'SQL commands, CREATE INDEX; 13.3 Explicit Locking'
	}),
	'create-index-concurrently': rule({
		locks: [['ShareUpdateExclusiveLock', 'table']],
		level: 2,
		inTransaction: false,
		cancel:
			'An invalid index that is still maintained on every write: DROP INDEX CONCURRENTLY it and start again.',
		undo: 'DROP INDEX CONCURRENTLY {index};',
		load: 'Reads the table twice and waits for every older transaction, also idle ones; more CPU and I/O than the plain form. One at a time on a table; not on a partitioned parent.',
		precheck: ['old-transactions', 'free-space', 'invalid-indexes'],
		section: 'SQL commands, CREATE INDEX (Building Indexes Concurrently)'
	}),
	'drop-index': rule({
		locks: [
			['AccessExclusiveLock', 'table-of-index'],
			['AccessExclusiveLock', 'index']
		],
		level: 3,
		undo: 'Create the index again: keep its definition (pg_get_indexdef) first.',
		load: SHORT_ONCE_GRANTED,
		precheck: ['old-transactions', 'index-use', 'lock-timeout'],
		section: 'SQL commands, DROP INDEX; 13.3 Explicit Locking'
	}),
	'drop-index-concurrently': rule({
		locks: [
			['ShareUpdateExclusiveLock', 'table-of-index'],
			['ShareUpdateExclusiveLock', 'index']
		],
		level: 2,
		inTransaction: false,
		cancel: 'It may leave the index invalid: run it again.',
		undo: 'Create the index again: keep its definition (pg_get_indexdef) first.',
		load: 'Waits for older transactions; not for an index of a constraint, no CASCADE.',
		precheck: ['old-transactions', 'index-use'],
		section: 'SQL commands, DROP INDEX'
	}),
	'reindex-table': rule({
		locks: [
			['AccessExclusiveLock', 'indexes'],
			['ShareLock', 'table']
		],
		level: 3,
		rewrites: true,
		undo: 'Nothing to undo.',
		load: 'Writes each index anew. Planning any query on the table looks at all its indexes, so reads stall as well.',
		precheck: ['old-transactions', 'free-space'],
		section: 'SQL commands, REINDEX; 13.3 Explicit Locking'
	}),
	'reindex-index': rule({
		locks: [
			['AccessExclusiveLock', 'index'],
			['ShareLock', 'table-of-index']
		],
		level: 3,
		rewrites: true,
		undo: 'Nothing to undo.',
		load: 'Writes the index anew. Planning any query on the table looks at all its indexes, so reads stall as well.',
		precheck: ['old-transactions', 'free-space'],
		section: 'SQL commands, REINDEX; 13.3 Explicit Locking'
	}),
	'reindex-many': rule({
		locks: [
			['AccessExclusiveLock', 'indexes'],
			['ShareLock', 'table']
		],
		level: 3,
		rewrites: true,
		inTransaction: false,
		cancel: 'Indexes done so far stay done.',
		undo: 'Nothing to undo.',
		load: 'Writes every index anew, table after table, each under its own lock.',
		precheck: ['old-transactions', 'free-space'],
		section: 'SQL commands, REINDEX'
	}),
	'reindex-concurrently': rule({
		locks: [
			['ShareUpdateExclusiveLock', 'table'],
			['ShareUpdateExclusiveLock', 'table-of-index']
		],
		level: 2,
		rewrites: true,
		inTransaction: false,
		cancel: 'An invalid index named …_ccnew (drop it and start again) or …_ccold (just drop it).',
		undo: 'Nothing to undo.',
		load: 'Builds each index beside the old one: twice its space, two reads of the table, waits for every older transaction. From version 12 on; not for system catalogs.',
		precheck: ['old-transactions', 'free-space', 'invalid-indexes'],
		section: 'SQL commands, REINDEX (Rebuilding Indexes Concurrently)'
	}),

	'create-statistics': rule({
		locks: [['ShareUpdateExclusiveLock', 'table']],
		level: 2,
		undo: 'DROP STATISTICS {statistics};',
		load: 'None by itself: empty until the next ANALYZE, which then changes plans.',
		precheck: ['statistics-age', 'saved-plan'],
		section: 'SQL commands, CREATE STATISTICS; 13.3 Explicit Locking'
	}),
	'drop-statistics': rule({
		locks: [['ShareUpdateExclusiveLock', 'table']],
		level: 2,
		undo: 'CREATE STATISTICS again, then ANALYZE.',
		load: 'Plans of every session may change at once.',
		precheck: ['saved-plan'],
		section: 'SQL commands, DROP STATISTICS'
	}),

	insert: rule({
		locks: [
			['RowExclusiveLock', 'table'],
			['AccessShareLock', 'source']
		],
		level: 2,
		undo: 'ROLLBACK before COMMIT; afterwards DELETE the rows by their keys.',
		load: 'WAL and index maintenance for each row; statistics grow old.',
		precheck: ['row-count', 'replicas'],
		section: 'SQL commands, INSERT; 13.3 Explicit Locking'
	}),
	update: rule({
		locks: [
			['RowExclusiveLock', 'table'],
			['AccessShareLock', 'source']
		],
		level: 3,
		cancel: 'Rolled back; the dead rows it made stay until VACUUM.',
		undo: 'ROLLBACK before COMMIT; afterwards only from a copy of the old rows or point-in-time recovery.',
		load: 'Rows found are locked until the transaction ends; WAL, bloat and replica lag by their number.',
		precheck: ['row-count', 'backup', 'replicas'],
		section: 'SQL commands, UPDATE; 13.3 Explicit Locking'
	}),
	'update-all': rule({
		locks: [
			['RowExclusiveLock', 'table'],
			['AccessShareLock', 'source']
		],
		level: 3,
		cancel: 'Rolled back at once; the dead rows it made stay until VACUUM.',
		undo: 'ROLLBACK before COMMIT; afterwards only from a copy or point-in-time recovery.',
		load: 'No condition: every row is locked until the transaction ends, the table may double, WAL of its size, replica lag, autovacuum afterwards. Do it in batches by key.',
		precheck: ['row-count', 'backup', 'replicas', 'free-space'],
		section: 'SQL commands, UPDATE; 13.3 Explicit Locking'
	}),
	delete: rule({
		locks: [
			['RowExclusiveLock', 'table'],
			['AccessShareLock', 'source']
		],
		level: 3,
		cancel: 'Rolled back.',
		undo: 'ROLLBACK before COMMIT; afterwards only from a copy of the rows or point-in-time recovery.',
		load: 'Rows found are locked until the transaction ends; WAL by their number; the space is only given back to the table by VACUUM.',
		precheck: ['row-count', 'backup', 'replicas'],
		section: 'SQL commands, DELETE; 13.3 Explicit Locking'
	}),
	'delete-all': rule({
		locks: [
			['RowExclusiveLock', 'table'],
			['AccessShareLock', 'source']
		],
		level: 3,
		cancel: 'Rolled back.',
		undo: 'ROLLBACK before COMMIT; afterwards only from a copy or point-in-time recovery.',
		load: 'No condition: every row is locked until the transaction ends; WAL of the table size, replica lag, dead rows until VACUUM. Do it in batches by key.',
		precheck: ['row-count', 'backup', 'replicas'],
		section: 'SQL commands, DELETE; 13.3 Explicit Locking'
	}),
	merge: rule({
		locks: [
			['RowExclusiveLock', 'table'],
			['AccessShareLock', 'source']
		],
		level: 3,
		cancel: 'Rolled back; the dead rows it made stay until VACUUM.',
		undo: 'ROLLBACK before COMMIT; afterwards only from a copy or point-in-time recovery.',
		load: 'Rows found are locked until the transaction ends; WAL and replica lag by their number.',
		precheck: ['row-count', 'backup', 'replicas'],
		section: 'SQL commands, MERGE; 13.3 Explicit Locking'
	}),
	'copy-from': rule({
		locks: [['RowExclusiveLock', 'table']],
		level: 2,
		cancel: 'Rolled back; the dead rows it made stay until VACUUM.',
		undo: 'ROLLBACK before COMMIT; afterwards DELETE the rows by their keys.',
		load: 'WAL and index maintenance for each row; statistics are old afterwards: ANALYZE.',
		precheck: ['free-space', 'replicas'],
		section: 'SQL commands, COPY'
	}),
	truncate: rule({
		locks: [['AccessExclusiveLock', 'table']],
		level: 3,
		undo: 'ROLLBACK before COMMIT; afterwards only point-in-time recovery.',
		load: 'Fast, little WAL, gives the space back. Older snapshots see the table empty; triggers for DELETE do not fire. With CASCADE also every table that refers to it.',
		precheck: ['backup', 'dependants', 'old-transactions', 'lock-timeout'],
		section: 'SQL commands, TRUNCATE; 13.3 Explicit Locking'
	}),

	'create-table': rule({
		locks: [['AccessExclusiveLock', 'new']],
		level: 1,
		undo: 'DROP TABLE {new};',
		load: 'Catalog only.',
		section: 'SQL commands, CREATE TABLE'
	}),
	'create-table-referencing': rule({
		locks: [
			['ShareRowExclusiveLock', 'referenced'],
			['AccessExclusiveLock', 'new']
		],
		level: 3,
		undo: 'DROP TABLE {new};',
		load: 'Catalog only, but writes to the referenced table wait until the transaction ends.',
		precheck: ['old-transactions', 'lock-timeout'],
		section: 'SQL commands, CREATE TABLE; 13.3 Explicit Locking'
	}),
	'create-table-as': rule({
		locks: [
			['AccessExclusiveLock', 'new'],
			['AccessShareLock', 'source']
		],
		level: 2,
		undo: 'DROP TABLE {new};',
		load: 'Reads what the query reads and writes the result: space and WAL of its size. No statistics until ANALYZE.',
		precheck: ['free-space'],
		section: 'SQL commands, CREATE TABLE AS'
	}),
	'create-partition': rule({
		locks: [
			['AccessExclusiveLock', 'table'],
			['AccessExclusiveLock', 'new']
		],
		level: 3,
		undo: 'ALTER TABLE {table} DETACH PARTITION {new}; then DROP TABLE.',
		load: 'Locks the parent (and its default partition, which it reads): make the table on its own and ATTACH it instead.',
		precheck: ['old-transactions', 'lock-timeout'],
		section: 'SQL commands, CREATE TABLE (PARTITION OF)'
	}),
	'drop-table': rule({
		locks: [['AccessExclusiveLock', 'table']],
		level: 3,
		undo: 'ROLLBACK before COMMIT; afterwards only point-in-time recovery.',
		load: 'Frees the space at commit. Tables that it refers to are locked as well.',
		precheck: ['backup', 'dependants', 'old-transactions', 'lock-timeout'],
		section: 'SQL commands, DROP TABLE; 13.3 Explicit Locking'
	}),
	'lock-table': rule({
		level: 2,
		inTransaction: true,
		cancel: 'The lock ends with the transaction.',
		undo: 'ROLLBACK or COMMIT.',
		load: 'Held until the transaction ends. Use NOWAIT rather than queue; outside a transaction block it is refused.',
		precheck: ['lock-queue', 'old-transactions'],
		section: 'SQL commands, LOCK; 13.3 Explicit Locking'
	}),
	'create-view': rule({
		locks: [
			['AccessExclusiveLock', 'new'],
			['AccessShareLock', 'source']
		],
		level: 1,
		undo: 'DROP VIEW {new};',
		load: 'Catalog only.',
		section: 'SQL commands, CREATE VIEW'
	}),
	'replace-view': rule({
		locks: [
			['AccessExclusiveLock', 'view'],
			['AccessShareLock', 'source']
		],
		level: 3,
		undo: 'Create it again from its old definition (pg_get_viewdef): keep that first.',
		load: SHORT_ONCE_GRANTED,
		precheck: ['old-transactions', 'lock-timeout', 'dependants'],
		section: 'SQL commands, CREATE VIEW'
	}),
	'drop-view': rule({
		locks: [['AccessExclusiveLock', 'view']],
		level: 3,
		undo: 'Create it again from its old definition (pg_get_viewdef): keep that first.',
		load: SHORT_ONCE_GRANTED,
		precheck: ['dependants', 'lock-timeout'],
		section: 'SQL commands, DROP VIEW'
	}),
	'refresh-materialized-view': rule({
		locks: [['AccessExclusiveLock', 'view']],
		level: 3,
		rewrites: true,
		cancel: 'The old contents stay.',
		undo: 'Nothing to undo; the old contents are gone.',
		load: 'Runs the whole query and writes a new copy with WAL; nobody can read the view meanwhile.',
		precheck: ['free-space', 'lock-timeout'],
		section: 'SQL commands, REFRESH MATERIALIZED VIEW; 13.3 Explicit Locking'
	}),
	'refresh-materialized-view-concurrently': rule({
		locks: [['ExclusiveLock', 'view']],
		level: 2,
		cancel: 'The old contents stay.',
		undo: 'Nothing to undo; the old contents are gone.',
		load: 'Runs the whole query and joins old with new: more CPU and bloat, but reads go on. One refresh at a time.',
		precheck: ['unique-index', 'free-space'],
		section: 'SQL commands, REFRESH MATERIALIZED VIEW; 13.3 Explicit Locking'
	}),

	'alter-system': rule({
		level: 2,
		inTransaction: false,
		cancel: 'The file postgresql.auto.conf is written at once.',
		undo: 'ALTER SYSTEM RESET {setting}; then select pg_reload_conf();',
		load: 'Nothing happens before pg_reload_conf() or a restart; then it reaches running sessions too, unless they have a value of their own.',
		precheck: ['setting-source', 'memory-exposure'],
		section: 'SQL commands, ALTER SYSTEM; Setting Parameters'
	}),
	'reload-configuration': rule({
		level: 2,
		cancel: 'Nothing: the signal is sent at once.',
		undo: 'Put the old values back and reload again.',
		load: 'Every running session takes the changed settings at its next command, unless it has a value of its own.',
		precheck: ['setting-source'],
		section: 'System Administration Functions; Setting Parameters'
	}),
	'alter-role-set': rule({
		level: 2,
		undo: 'ALTER ROLE {role} RESET {setting};',
		load: 'New sessions of the role only: sessions already open keep their value.',
		precheck: ['role-settings', 'memory-exposure'],
		section: 'SQL commands, ALTER ROLE'
	}),
	'alter-database-set': rule({
		level: 2,
		undo: 'ALTER DATABASE {database} RESET {setting};',
		load: 'New sessions in the database only: sessions already open keep their value.',
		precheck: ['role-settings', 'memory-exposure'],
		section: 'SQL commands, ALTER DATABASE'
	}),
	'cancel-backend': rule({
		level: 2,
		cancel: 'Nothing: the signal is sent at once.',
		undo: 'Cannot be undone; the other session can run its statement again.',
		load: 'The other session loses its running statement; true means that the signal was sent, not that it stopped. Sessions idle in a transaction ignore it.',
		precheck: ['right-backend'],
		section: 'System Administration Functions'
	}),
	'terminate-backend': rule({
		level: 3,
		cancel: 'Nothing: the signal is sent at once.',
		undo: 'Cannot be undone: the session is gone and its transaction rolled back; its client has to connect again.',
		load: 'The other client sees an error. Never kill -9 instead: the whole server would restart.',
		precheck: ['right-backend'],
		section: 'System Administration Functions'
	}),
	'reset-statistics': rule({
		level: 3,
		cancel: 'Nothing: it is done at once.',
		undo: 'Cannot be undone: the counters are gone.',
		load: 'Evidence of the incident is lost, and autovacuum forgets what it counted.',
		precheck: ['save-counters'],
		section: 'The Cumulative Statistics System'
	}),
	checkpoint: rule({
		level: 2,
		cancel: 'Nothing.',
		undo: 'Nothing to undo.',
		load: 'A burst of writes.',
		section: 'SQL commands, CHECKPOINT'
	}),
	comment: rule({
		locks: [['ShareUpdateExclusiveLock', 'table']],
		level: 2,
		undo: 'COMMENT ON … IS the old text, or NULL.',
		section: 'SQL commands, COMMENT; 13.3 Explicit Locking'
	}),
	grant: rule({
		level: 2,
		undo: 'The opposite command: REVOKE or GRANT.',
		load: 'Catalog only; sessions are held to it at once.',
		precheck: ['dependants'],
		section: 'SQL commands, GRANT, REVOKE'
	}),
	'create-trigger': rule({
		locks: [['ShareRowExclusiveLock', 'table']],
		level: 3,
		undo: 'DROP TRIGGER on {table};',
		load: 'Short, but then runs for each row or statement.',
		precheck: ['old-transactions', 'lock-timeout'],
		section: 'SQL commands, CREATE TRIGGER; 13.3 Explicit Locking'
	}),
	'create-policy': rule({
		locks: [['AccessExclusiveLock', 'table']],
		level: 3,
		undo: 'Drop it again.',
		load: SHORT_ONCE_GRANTED,
		precheck: ['old-transactions', 'lock-timeout'],
		section: 'SQL commands, CREATE POLICY, CREATE RULE'
	}),
	'alter-enum-add-value': rule({
		level: 2,
		cancel: 'Nothing.',
		undo: 'Cannot be undone: a value cannot be taken out.',
		load: 'Catalog only. Inside a transaction from version 12 on; the value cannot be used before commit.',
		section: 'SQL commands, ALTER TYPE'
	}),

	'alter-table-add-column': brief({
		undo: 'ALTER TABLE {table} DROP COLUMN {column};',
		load: `Catalog only. ${SHORT_ONCE_GRANTED}`
	}),
	'alter-table-add-column-rewriting': rewriting({ undo: 'ALTER TABLE {table} DROP COLUMN {column};' }),
	'alter-table-drop-column': brief({
		undo: 'ROLLBACK before COMMIT; afterwards the data of the column is gone.',
		load: `Catalog only: the space is not given back. ${SHORT_ONCE_GRANTED}`,
		precheck: ['dependants', 'backup', 'old-transactions', 'lock-timeout']
	}),
	'alter-table-column-type': rewriting({
		undo: 'Change the type back: another rewrite.',
		load: 'Writes the table and its indexes anew unless the old and new type are binary compatible (text to varchar is not, widening varchar is): twice the space, WAL, replica lag. Statistics of the column are lost: ANALYZE.'
	}),
	'alter-table-set-not-null': brief({
		undo: 'ALTER TABLE {table} ALTER COLUMN {column} DROP NOT NULL;',
		load: 'Reads the whole table under the lock, unless a valid CHECK (… IS NOT NULL) proves it (from version 12 on).'
	}),
	'alter-table-column-default': brief({ undo: 'Set or drop the default again.' }),
	'alter-table-add-check': brief({
		undo: 'ALTER TABLE {table} DROP CONSTRAINT {constraint};',
		load: 'Reads the whole table under the lock. NOT VALID first and VALIDATE later blocks only for a moment.'
	}),
	'alter-table-add-check-not-valid': brief({
		undo: 'ALTER TABLE {table} DROP CONSTRAINT {constraint};',
		load: `No reading of old rows; new rows are checked at once. ${SHORT_ONCE_GRANTED}`
	}),
	'alter-table-add-foreign-key': rule({
		locks: [
			['ShareRowExclusiveLock', 'table'],
			['ShareRowExclusiveLock', 'referenced']
		],
		level: 3,
		undo: 'ALTER TABLE {table} DROP CONSTRAINT {constraint};',
		load: 'Reads the table while writes to both tables wait. NOT VALID first and VALIDATE later is gentler.',
		precheck: ['old-transactions', 'free-space', 'lock-timeout'],
		section: ALTER
	}),
	'alter-table-add-foreign-key-not-valid': rule({
		locks: [
			['ShareRowExclusiveLock', 'table'],
			['ShareRowExclusiveLock', 'referenced']
		],
		level: 3,
		undo: 'ALTER TABLE {table} DROP CONSTRAINT {constraint};',
		load: 'Short: old rows are not read. Writes to both tables wait while it waits.',
		precheck: ['old-transactions', 'lock-timeout'],
		section: ALTER
	}),
	'alter-table-add-unique': brief({
		undo: 'ALTER TABLE {table} DROP CONSTRAINT {constraint};',
		load: 'Builds an index while nobody can read or write. CREATE UNIQUE INDEX CONCURRENTLY first, then ADD … USING INDEX.',
		precheck: ['free-space', 'old-transactions', 'lock-timeout']
	}),
	'alter-table-add-constraint-using-index': brief({
		undo: 'ALTER TABLE {table} DROP CONSTRAINT {constraint}; (drops the index too)',
		precheck: ['invalid-indexes', 'old-transactions', 'lock-timeout']
	}),
	'alter-table-validate-constraint': rule({
		locks: [
			['ShareUpdateExclusiveLock', 'table'],
			['RowShareLock', 'referenced-by-constraint']
		],
		level: 2,
		cancel: 'The constraint stays NOT VALID.',
		undo: 'Nothing to undo.',
		load: 'Reads the whole table; reads and writes go on.',
		precheck: ['old-transactions'],
		section: ALTER
	}),
	'alter-table-drop-constraint': brief({
		undo: 'Add the constraint again: keep its definition (pg_get_constraintdef) first.',
		load: `A foreign key's other table is locked as well. ${SHORT_ONCE_GRANTED}`,
		precheck: ['dependants', 'old-transactions', 'lock-timeout']
	}),
	'alter-table-rename': brief({
		undo: 'Rename it back.',
		load: `Running applications that use the old name break. ${SHORT_ONCE_GRANTED}`,
		precheck: ['dependants', 'old-transactions', 'lock-timeout']
	}),
	'alter-table-set-statistics': gentle({
		undo: 'ALTER TABLE {table} ALTER COLUMN {column} SET STATISTICS -1; then ANALYZE.',
		load: 'None until the next ANALYZE, which then reads a larger sample.',
		precheck: ['statistics-age', 'saved-plan']
	}),
	'alter-table-column-options': gentle({
		undo: 'ALTER TABLE {table} ALTER COLUMN {column} RESET (n_distinct); then ANALYZE.',
		load: 'None until the next ANALYZE, which then changes plans.',
		precheck: ['statistics-age', 'saved-plan']
	}),
	'alter-table-storage-parameters': gentle({
		undo: 'ALTER TABLE {table} RESET the parameter.',
		load: 'None at once: fillfactor acts on new pages only, autovacuum at its next round.'
	}),
	'alter-table-storage-parameters-exclusive': brief({ undo: 'RESET the parameter.' }),
	'alter-table-column-storage': brief({
		undo: 'Set the old storage again.',
		load: `Acts on new values only. ${SHORT_ONCE_GRANTED}`
	}),
	'alter-table-move': rewriting({
		undo: 'Set it back: another copy.',
		load: 'Copies the table (a new tablespace, logged or unlogged, another access method): space and WAL of its size. UNLOGGED is emptied after a crash and absent on replicas.'
	}),
	'alter-table-attach-partition': rule({
		locks: [
			['AccessExclusiveLock', 'partition'],
			['ShareUpdateExclusiveLock', 'table']
		],
		level: 3,
		undo: 'ALTER TABLE {table} DETACH PARTITION {partition};',
		load: 'Reads the new partition (and locks and reads the default one) unless a matching CHECK proves its rows.',
		precheck: ['free-space', 'old-transactions'],
		section: ALTER
	}),
	'alter-table-detach-partition': rule({
		locks: [
			['AccessExclusiveLock', 'table'],
			['AccessExclusiveLock', 'partition']
		],
		level: 3,
		undo: 'ALTER TABLE {table} ATTACH PARTITION {partition} …;',
		load: SHORT_ONCE_GRANTED,
		precheck: ['old-transactions', 'lock-timeout'],
		section: ALTER
	}),
	'alter-table-detach-partition-concurrently': rule({
		locks: [['ShareUpdateExclusiveLock', 'table']],
		level: 2,
		inTransaction: false,
		cancel: 'Half detached: finish with ALTER TABLE {table} DETACH PARTITION {partition} FINALIZE.',
		undo: 'ALTER TABLE {table} ATTACH PARTITION {partition} …;',
		load: 'Two transactions, waits for older ones; not beside a default partition. From version 14 on.',
		precheck: ['old-transactions'],
		section: ALTER
	}),
	'alter-table-detach-partition-finalize': rule({
		locks: [
			['AccessExclusiveLock', 'partition'],
			['ShareUpdateExclusiveLock', 'table']
		],
		level: 3,
		undo: 'ALTER TABLE {table} ATTACH PARTITION {partition} …;',
		load: SHORT_ONCE_GRANTED,
		precheck: ['old-transactions'],
		section: ALTER
	}),
	'alter-table-trigger': rule({
		locks: [['ShareRowExclusiveLock', 'table']],
		level: 3,
		undo: 'The opposite: ENABLE or DISABLE TRIGGER.',
		load: 'Short. Rows written while a trigger is off are never seen by it.',
		precheck: ['dependants', 'lock-timeout'],
		section: ALTER
	}),
	'alter-table-brief': brief({ undo: 'The opposite command.' }),
	'alter-table-cluster-on': gentle({ undo: 'SET WITHOUT CLUSTER, or the old index.' })
} as const satisfies Record<string, PostgresRule>;

export type PostgresKind = keyof typeof POSTGRES_RULES;
