import type { AlterTableCmd, AlterTableStmt, ColumnDef, Constraint, Node } from 'libpg-query';
import { versionOf } from '../version';
import { isStable } from './postgresql-functions';
import type { PostgresKind } from './postgresql';
import { nameOf, nameOfList, walkStatement, type Classified, type Finding } from './postgresql-tree';

/** Forms whose row in the table needs no second look, by the grammar's own names. */
const SIMPLE: Partial<Record<string, PostgresKind>> = {
	AT_DropColumn: 'alter-table-drop-column',
	AT_AlterColumnType: 'alter-table-column-type',
	AT_SetNotNull: 'alter-table-set-not-null',
	AT_DropNotNull: 'alter-table-brief',
	AT_ColumnDefault: 'alter-table-column-default',
	AT_DropConstraint: 'alter-table-drop-constraint',
	AT_ValidateConstraint: 'alter-table-validate-constraint',
	AT_SetStatistics: 'alter-table-set-statistics',
	AT_SetOptions: 'alter-table-column-options',
	AT_ResetOptions: 'alter-table-column-options',
	AT_SetStorage: 'alter-table-column-storage',
	AT_SetCompression: 'alter-table-column-storage',
	AT_SetLogged: 'alter-table-move',
	AT_SetUnLogged: 'alter-table-move',
	AT_SetTableSpace: 'alter-table-move',
	AT_SetAccessMethod: 'alter-table-move',
	AT_ClusterOn: 'alter-table-cluster-on',
	AT_DropCluster: 'alter-table-cluster-on',
	AT_EnableTrig: 'alter-table-trigger',
	AT_EnableAlwaysTrig: 'alter-table-trigger',
	AT_EnableReplicaTrig: 'alter-table-trigger',
	AT_DisableTrig: 'alter-table-trigger',
	AT_EnableTrigAll: 'alter-table-trigger',
	AT_DisableTrigAll: 'alter-table-trigger',
	AT_EnableTrigUser: 'alter-table-trigger',
	AT_DisableTrigUser: 'alter-table-trigger',
	AT_EnableRowSecurity: 'alter-table-brief',
	AT_DisableRowSecurity: 'alter-table-brief',
	AT_ForceRowSecurity: 'alter-table-brief',
	AT_NoForceRowSecurity: 'alter-table-brief',
	AT_ChangeOwner: 'alter-table-brief',
	AT_ReplicaIdentity: 'alter-table-brief',
	AT_AddIdentity: 'alter-table-brief',
	AT_SetIdentity: 'alter-table-brief',
	AT_DropIdentity: 'alter-table-brief',
	AT_DropExpression: 'alter-table-brief',
	AT_SetExpression: 'alter-table-add-column-rewriting'
};

/** Storage parameters that are set under ShareUpdateExclusiveLock (CREATE TABLE, Storage Parameters). */
const GENTLE_PARAMETERS =
	/^(fillfactor|autovacuum_.*|parallel_workers|toast_tuple_target|log_autovacuum_min_duration|vacuum_index_cleanup|vacuum_truncate|deduplicate_items)$/;

const SERIAL = /^(small|big)?serial[248]?$/;

/** ALTER TABLE: one finding a form, in the order written; one form not understood makes the whole so. */
export function classifyAlterTable(statement: AlterTableStmt, engineVersion: string | null): Classified {
	if (statement.objtype !== 'OBJECT_TABLE') {
		return { why: 'Only ALTER TABLE is in the lock table, not ALTER of an index, a view or another object.' };
	}
	const table = nameOf(statement.relation);
	const findings: Finding[] = [];
	for (const node of statement.cmds ?? []) {
		const found = 'AlterTableCmd' in node ? classifyForm(node.AlterTableCmd, table, engineVersion) : null;
		if (found === null) return { why: 'A form of this ALTER TABLE is not in the lock table.' };
		findings.push(found);
	}
	return findings;
}

function classifyForm(form: AlterTableCmd, table: string, engineVersion: string | null): Finding | null {
	const things = { table: [table] };
	const words = { column: form.name ?? 'the column', constraint: form.name ?? 'the constraint' };
	const simple = SIMPLE[form.subtype ?? ''];
	if (simple !== undefined) return { kind: simple, things, words };
	const definition = form.def;
	switch (form.subtype) {
		case 'AT_AddColumn':
			return definition !== undefined && 'ColumnDef' in definition
				? classifyNewColumn(definition.ColumnDef, table, engineVersion)
				: null;
		case 'AT_AddConstraint':
			return definition !== undefined && 'Constraint' in definition
				? classifyConstraint(definition.Constraint, table)
				: null;
		case 'AT_SetRelOptions':
		case 'AT_ResetRelOptions':
			return { kind: relationOptions(definition), things, words };
		case 'AT_AttachPartition':
		case 'AT_DetachPartition':
		case 'AT_DetachPartitionFinalize':
			return classifyPartition(form, table);
		default:
			return null;
	}
}

function classifyNewColumn(column: ColumnDef, table: string, engineVersion: string | null): Finding {
	const referenced: string[] = [];
	let rewrites = SERIAL.test(nameOfList(column.typeName?.names).replace(/^pg_catalog\./, ''));
	for (const node of column.constraints ?? []) {
		if (!('Constraint' in node)) continue;
		const constraint = node.Constraint;
		if (constraint.contype === 'CONSTR_FOREIGN') referenced.push(nameOf(constraint.pktable));
		rewrites ||= isRewritten(constraint, engineVersion);
	}
	return {
		kind: rewrites ? 'alter-table-add-column-rewriting' : 'alter-table-add-column',
		things: { table: [table] },
		words: { column: column.colname ?? 'the column' },
		named: referenced.map((on) => ({ mode: 'ShareRowExclusiveLock', on }))
	};
}

/** Whether a new column with this constraint has to be written into every row (ALTER TABLE, Notes). */
function isRewritten(constraint: Constraint, engineVersion: string | null): boolean {
	if (constraint.contype === 'CONSTR_IDENTITY') return true;
	if (constraint.contype === 'CONSTR_GENERATED') return constraint.generated_kind !== 'v';
	if (constraint.contype !== 'CONSTR_DEFAULT') return false;
	const version = versionOf(engineVersion);
	if (version !== null && version < 11) return true;
	return !walkStatement(constraint.raw_expr).functions.every(isStable);
}

function classifyConstraint(constraint: Constraint, table: string): Finding | null {
	const things = { table: [table], referenced: [nameOf(constraint.pktable)] };
	const words = { constraint: constraint.conname ?? 'the constraint' };
	const notValid = constraint.skip_validation === true;
	switch (constraint.contype) {
		case 'CONSTR_FOREIGN':
			return {
				kind: notValid ? 'alter-table-add-foreign-key-not-valid' : 'alter-table-add-foreign-key',
				things,
				words
			};
		case 'CONSTR_CHECK':
		case 'CONSTR_NOTNULL':
			return { kind: notValid ? 'alter-table-add-check-not-valid' : 'alter-table-add-check', things, words };
		case 'CONSTR_PRIMARY':
		case 'CONSTR_UNIQUE':
		case 'CONSTR_EXCLUSION':
			return {
				kind:
					constraint.indexname === undefined
						? 'alter-table-add-unique'
						: 'alter-table-add-constraint-using-index',
				things,
				words
			};
		default:
			return null;
	}
}

function relationOptions(definition: Node | undefined): PostgresKind {
	const items = definition !== undefined && 'List' in definition ? (definition.List.items ?? []) : [];
	const isGentle = items.every(
		(item) => 'DefElem' in item && GENTLE_PARAMETERS.test(item.DefElem.defname ?? '')
	);
	return isGentle ? 'alter-table-storage-parameters' : 'alter-table-storage-parameters-exclusive';
}

function classifyPartition(form: AlterTableCmd, table: string): Finding | null {
	if (form.def === undefined || !('PartitionCmd' in form.def)) return null;
	const partition = nameOf(form.def.PartitionCmd.name);
	const things = { table: [table], partition: [partition] };
	if (form.subtype === 'AT_AttachPartition') return { kind: 'alter-table-attach-partition', things };
	if (form.subtype === 'AT_DetachPartitionFinalize') {
		return { kind: 'alter-table-detach-partition-finalize', things };
	}
	const concurrently = form.def.PartitionCmd.concurrent === true;
	return {
		kind: concurrently ? 'alter-table-detach-partition-concurrently' : 'alter-table-detach-partition',
		things
	};
}
