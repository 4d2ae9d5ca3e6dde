import type { CreateStmt, DropStmt, Node } from 'libpg-query';
import { nameOf, relationsOf, textOf, walkStatement, type Finding } from './postgresql-tree';

/** CREATE and DROP of tables, views, indexes and what hangs on tables; RENAME, COMMENT, GRANT, COPY. */
export function classifyDefinition(node: Node): Finding[] | null {
	if ('CreateStmt' in node) return [createTable(node.CreateStmt)];
	if ('CreateTableAsStmt' in node) {
		const { into, query } = node.CreateTableAsStmt;
		return [
			{
				kind: 'create-table-as',
				things: { new: [nameOf(into?.rel)], source: walkStatement(query).relations }
			}
		];
	}
	if ('ViewStmt' in node) {
		const { view, query, replace } = node.ViewStmt;
		const source = walkStatement(query).relations;
		return replace === true
			? [{ kind: 'replace-view', things: { view: [nameOf(view)], source } }]
			: [{ kind: 'create-view', things: { new: [nameOf(view)], source } }];
	}
	if ('DropStmt' in node) return dropObjects(node.DropStmt);
	if ('RenameStmt' in node && node.RenameStmt.relation !== undefined) {
		if (!['OBJECT_TABLE', 'OBJECT_COLUMN', 'OBJECT_TABCONSTRAINT'].includes(node.RenameStmt.renameType ?? ''))
			return null;
		return [{ kind: 'alter-table-rename', things: { table: [nameOf(node.RenameStmt.relation)] } }];
	}
	if ('CreateTrigStmt' in node)
		return [{ kind: 'create-trigger', things: { table: [nameOf(node.CreateTrigStmt.relation)] } }];
	if ('CreatePolicyStmt' in node)
		return [{ kind: 'create-policy', things: { table: [nameOf(node.CreatePolicyStmt.table)] } }];
	if ('CommentStmt' in node) {
		const { objtype, object } = node.CommentStmt;
		if (objtype !== 'OBJECT_TABLE' || object === undefined) return null;
		return [{ kind: 'comment', things: { table: [textOf(object)] } }];
	}
	return null;
}

function createTable(statement: CreateStmt): Finding {
	const made = nameOf(statement.relation);
	if (statement.partbound !== undefined) {
		return { kind: 'create-partition', things: { table: relationsOf(statement.inhRelations), new: [made] } };
	}
	const referenced = foreignTables(statement.tableElts);
	const kind = referenced.length > 0 ? 'create-table-referencing' : 'create-table';
	return { kind, things: { new: [made], referenced } };
}

function foreignTables(elements: readonly Node[] | undefined): string[] {
	return (elements ?? []).flatMap((node): string[] => {
		if ('ColumnDef' in node) return foreignTables(node.ColumnDef.constraints);
		if (!('Constraint' in node) || node.Constraint.contype !== 'CONSTR_FOREIGN') return [];
		return [nameOf(node.Constraint.pktable)];
	});
}

function dropObjects(statement: DropStmt): Finding[] | null {
	const names = (statement.objects ?? []).map(textOf);
	switch (statement.removeType) {
		case 'OBJECT_TABLE':
			return [{ kind: 'drop-table', things: { table: names } }];
		case 'OBJECT_VIEW':
		case 'OBJECT_MATVIEW':
			return [{ kind: 'drop-view', things: { view: names } }];
		case 'OBJECT_INDEX': {
			const kind = statement.concurrent === true ? 'drop-index-concurrently' : 'drop-index';
			return [
				{ kind, things: { index: names, 'table-of-index': names.map((name) => `the table of ${name}`) } }
			];
		}
		case 'OBJECT_STATISTIC_EXT':
			return [
				{ kind: 'drop-statistics', things: { table: names.map((name) => `the table of ${name}`) }, words: {} }
			];
		default:
			return null;
	}
}
