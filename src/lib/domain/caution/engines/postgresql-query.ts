import { readsOnly } from './postgresql-functions';
import type { PostgresKind } from './postgresql';
import { walkStatement, type Classified, type Finding, type Met, type Write } from './postgresql-tree';

/** Functions that do something, and the row of the table that says what. */
const EFFECTS: Record<string, PostgresKind> = {
	pg_reload_conf: 'reload-configuration',
	pg_cancel_backend: 'cancel-backend',
	pg_terminate_backend: 'terminate-backend',
	set_config: 'set',
	pg_stat_reset: 'reset-statistics',
	pg_stat_reset_shared: 'reset-statistics',
	pg_stat_reset_single_table_counters: 'reset-statistics',
	pg_stat_reset_single_function_counters: 'reset-statistics',
	pg_stat_reset_slru: 'reset-statistics',
	pg_stat_statements_reset: 'reset-statistics'
};

const WRITE_KINDS: Record<Write['tag'], { kind: PostgresKind; all: PostgresKind }> = {
	InsertStmt: { kind: 'insert', all: 'insert' },
	UpdateStmt: { kind: 'update', all: 'update-all' },
	DeleteStmt: { kind: 'delete', all: 'delete-all' },
	MergeStmt: { kind: 'merge', all: 'merge' }
};

/**
 * SELECT, VALUES, TABLE, INSERT, UPDATE, DELETE and MERGE: by what they read, write and call. A function that
 * is not known to read only makes the statement not understood: it may do anything.
 */
export function classifyQuery(statement: unknown): Classified {
	const met = walkStatement(statement);
	const effects = met.functions.filter((name) => name in EFFECTS);
	const unknown = met.functions.filter(
		(name) => !(name in EFFECTS) && !readsOnly(name) && !isKeyOfNewRow(name, met)
	);
	if (unknown.length > 0) {
		return {
			why: `It calls ${unknown.join(', ')}, which is not known to read only: it may change data or take locks.`
		};
	}
	const findings = [...met.writes.map((write) => toWriteFinding(write, met)), ...effects.map(toEffect)];
	if (met.into !== null) {
		findings.push({ kind: 'create-table-as', things: { new: [met.into], source: met.relations } });
	}
	if (findings.length > 0) return findings;
	return [toReadFinding(met)];
}

/** A sequence's next value in a statement that writes anyway is no surprise. */
function isKeyOfNewRow(name: string, met: Met): boolean {
	return name === 'nextval' && met.writes.length > 0;
}

function toWriteFinding(write: Write, met: Met): Finding {
	const { kind, all } = WRITE_KINDS[write.onConflict ? 'MergeStmt' : write.tag];
	const source = met.relations.filter((name) => !met.writes.some(({ table }) => table === name));
	return { kind: write.hasCondition ? kind : all, things: { table: [write.table], source } };
}

function toEffect(name: string): Finding {
	return { kind: EFFECTS[name] ?? 'set', things: {}, words: { setting: 'the setting' } };
}

function toReadFinding(met: Met): Finding {
	if (met.locksRows) return { kind: 'select-for-update', things: { table: met.relations } };
	return { kind: 'select', things: { source: met.relations } };
}
