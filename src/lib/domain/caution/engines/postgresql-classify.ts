import type {
	ClusterStmt,
	ExplainStmt,
	IndexStmt,
	LockStmt,
	Node,
	ReindexStmt,
	VacuumStmt,
	VariableSetStmt
} from 'libpg-query';
import { LOCK_MODES } from '../lock-modes';
import { classifyAlterTable } from './postgresql-alter';
import type { PostgresKind } from './postgresql';
import { classifyDefinition } from './postgresql-definitions';
import { classifyQuery } from './postgresql-query';
import {
	hasOption,
	nameOf,
	nameOfList,
	relationsOf,
	walkStatement,
	type Classified,
	type Finding
} from './postgresql-tree';

const EVERY_TABLE = 'every table of the database';

/** Looks one parsed statement up: which rows of the lock table it is, or why it is not understood. */
export function classifyNode(node: Node, engineVersion: string | null): Classified {
	if (
		'SelectStmt' in node ||
		'InsertStmt' in node ||
		'UpdateStmt' in node ||
		'DeleteStmt' in node ||
		'MergeStmt' in node
	)
		return classifyQuery(node);
	if ('ExplainStmt' in node) return classifyExplain(node.ExplainStmt, engineVersion);
	if ('AlterTableStmt' in node) return classifyAlterTable(node.AlterTableStmt, engineVersion);
	return classifyMaintenance(node) ?? classifySetting(node) ?? classifyDefinition(node) ?? classifyRest(node);
}

/** VACUUM, ANALYZE, indexes, statistics, CLUSTER, LOCK, TRUNCATE, REFRESH. */
function classifyMaintenance(node: Node): Finding[] | null {
	if ('VacuumStmt' in node) return [vacuumOrAnalyze(node.VacuumStmt)];
	if ('IndexStmt' in node) return [createIndex(node.IndexStmt)];
	if ('ReindexStmt' in node) return [reindex(node.ReindexStmt)];
	if ('ClusterStmt' in node) return [cluster(node.ClusterStmt)];
	if ('LockStmt' in node) return [lockTable(node.LockStmt)];
	if ('TruncateStmt' in node)
		return [{ kind: 'truncate', things: { table: relationsOf(node.TruncateStmt.relations) } }];
	if ('RefreshMatViewStmt' in node) {
		const { concurrent, relation } = node.RefreshMatViewStmt;
		const kind = concurrent === true ? 'refresh-materialized-view-concurrently' : 'refresh-materialized-view';
		return [{ kind, things: { view: [nameOf(relation)] } }];
	}
	if ('CreateStatsStmt' in node) {
		const statistics = nameOfList(node.CreateStatsStmt.defnames) || 'the new statistics';
		return [
			{
				kind: 'create-statistics',
				things: { table: relationsOf(node.CreateStatsStmt.relations) },
				words: { statistics }
			}
		];
	}
	if ('CheckPointStmt' in node) return [{ kind: 'checkpoint', things: {} }];
	return null;
}

function vacuumOrAnalyze(statement: VacuumStmt): Finding {
	const named = (statement.rels ?? []).flatMap((node) =>
		'VacuumRelation' in node ? [nameOf(node.VacuumRelation.relation)] : []
	);
	const things = { table: named.length > 0 ? named : [EVERY_TABLE] };
	if (statement.is_vacuumcmd !== true) return { kind: 'analyze', things };
	if (hasOption(statement.options, 'full')) return { kind: 'vacuum-full', things };
	const note = hasOption(statement.options, 'analyze')
		? 'Takes statistics too: plans may change.'
		: undefined;
	if (hasOption(statement.options, 'freeze')) return { kind: 'vacuum-freeze', things, note };
	return { kind: 'vacuum', things, note };
}

function createIndex(statement: IndexStmt): Finding {
	const kind = statement.concurrent === true ? 'create-index-concurrently' : 'create-index';
	const index = [statement.idxname ?? 'the new index'];
	return { kind, things: { table: [nameOf(statement.relation)], index } };
}

function reindex(statement: ReindexStmt): Finding {
	const name = nameOf(statement.relation);
	const concurrently = hasOption(statement.params, 'concurrently');
	if (statement.kind === 'REINDEX_OBJECT_INDEX') {
		const things = { index: [name], 'table-of-index': [`the table of ${name}`] };
		return { kind: concurrently ? 'reindex-concurrently' : 'reindex-index', things };
	}
	if (statement.kind === 'REINDEX_OBJECT_TABLE') {
		const things = { table: [name], indexes: [`the indexes of ${name}`] };
		return { kind: concurrently ? 'reindex-concurrently' : 'reindex-table', things };
	}
	const things = { table: ['every table in turn'], indexes: ['every index in turn'] };
	return { kind: concurrently ? 'reindex-concurrently' : 'reindex-many', things };
}

function cluster(statement: ClusterStmt): Finding {
	if (statement.relation === undefined)
		return { kind: 'cluster-all', things: { table: ['every clustered table'] } };
	const table = nameOf(statement.relation);
	return {
		kind: 'cluster',
		things: { table: [table], index: [statement.indexname ?? `the index that ${table} is clustered on`] }
	};
}

function lockTable(statement: LockStmt): Finding {
	const mode = LOCK_MODES[(statement.mode ?? 8) - 1] ?? 'AccessExclusiveLock';
	const table = relationsOf(statement.relations);
	return { kind: 'lock-table', things: { table }, named: table.map((on) => ({ mode, on })) };
}

/** SET, SHOW, ALTER SYSTEM, ALTER ROLE and ALTER DATABASE … SET, transactions, prepared statements. */
function classifySetting(node: Node): Finding[] | null {
	const one = (kind: PostgresKind, words: Record<string, string> = {}): Finding[] => [
		{ kind, things: {}, words }
	];
	if ('VariableSetStmt' in node)
		return one(setKind(node.VariableSetStmt), { setting: settingOf(node.VariableSetStmt) });
	if ('VariableShowStmt' in node) return one('show');
	if ('AlterSystemStmt' in node)
		return one('alter-system', { setting: settingOf(node.AlterSystemStmt.setstmt) });
	if ('AlterRoleSetStmt' in node) {
		const { role, setstmt } = node.AlterRoleSetStmt;
		return one('alter-role-set', { role: role?.rolename ?? 'ALL', setting: settingOf(setstmt) });
	}
	if ('AlterDatabaseSetStmt' in node) {
		const { dbname, setstmt } = node.AlterDatabaseSetStmt;
		return one('alter-database-set', { database: dbname ?? 'the database', setting: settingOf(setstmt) });
	}
	if ('TransactionStmt' in node) return one(transactionKind(node.TransactionStmt.kind));
	if ('PrepareStmt' in node) return one('prepare');
	if ('DeallocateStmt' in node) return one('deallocate');
	if ('DiscardStmt' in node) return one('discard');
	return null;
}

function setKind(statement: VariableSetStmt): PostgresKind {
	if (statement.kind === 'VAR_RESET' || statement.kind === 'VAR_RESET_ALL') return 'reset';
	return statement.is_local === true ? 'set-local' : 'set';
}

function transactionKind(kind: string | undefined): PostgresKind {
	if (kind === 'TRANS_STMT_PREPARE') return 'prepare-transaction';
	return kind?.endsWith('_PREPARED') === true ? 'end-prepared-transaction' : 'transaction';
}

function settingOf(statement: VariableSetStmt | undefined): string {
	return statement?.name ?? 'ALL';
}

/** EXPLAIN plans only; EXPLAIN ANALYZE carries the statement out, whatever it is. */
function classifyExplain(statement: ExplainStmt, engineVersion: string | null): Classified {
	const query = statement.query;
	if (query === undefined) return { why: 'It explains nothing.' };
	if (!hasOption(statement.options, 'analyze')) {
		const met = walkStatement(query);
		const written = met.writes.map(({ table }) => table);
		const named = written.map((on) => ({ mode: 'RowExclusiveLock' as const, on }));
		return [
			{ kind: 'explain', things: { source: met.relations.filter((name) => !written.includes(name)) }, named }
		];
	}
	const inner = classifyNode(query, engineVersion);
	if ('why' in inner) return { why: `EXPLAIN ANALYZE carries the statement out. ${inner.why}` };
	const note = inner.every(({ kind }) => kind === 'select')
		? 'Carries the query out: as long and as heavy as the query itself.'
		: 'Carries the statement out, rows are really written: put it between BEGIN and ROLLBACK.';
	return inner.map((finding) => ({ ...finding, note, shownAs: 'explain-analyze' }));
}

function classifyRest(node: Node): Classified {
	if ('CopyStmt' in node) {
		const { is_program, filename, is_from, relation, query } = node.CopyStmt;
		if (is_program === true) return { why: 'COPY … PROGRAM runs a program on the server.' };
		if (is_from === true) return [{ kind: 'copy-from', things: { table: [nameOf(relation)] } }];
		if (filename !== undefined) return { why: 'COPY … TO a file writes on the server.' };
		if (query !== undefined) return classifyNode(query, null);
		return [{ kind: 'copy-to', things: { source: [nameOf(relation)] } }];
	}
	if ('DeclareCursorStmt' in node && node.DeclareCursorStmt.query !== undefined)
		return classifyQuery(node.DeclareCursorStmt.query);
	if ('GrantStmt' in node) return [{ kind: 'grant', things: {} }];
	if ('AlterEnumStmt' in node) return [{ kind: 'alter-enum-add-value', things: {} }];
	return { why: `${commandOf(node)} is not in the lock table.` };
}

/** "CREATE FUNCTION" for a node of CreateFunctionStmt. */
function commandOf(node: Node): string {
	const tag = Object.keys(node)[0] ?? 'This statement';
	return tag
		.replace(/Stmt$/, '')
		.replace(/([a-z])([A-Z])/g, '$1 $2')
		.toUpperCase();
}
