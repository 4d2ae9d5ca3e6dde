import type { Node, RangeVar } from 'libpg-query';
import type { LockMode } from '../lock-modes';
import type { PostgresKind, PostgresThing } from './postgresql';

/** What one statement, or one form within ALTER TABLE, is in the lock table, with the names that it says. */
export interface Finding {
	kind: PostgresKind;
	things: Partial<Record<PostgresThing, string[]>>;
	/** For `{setting}`, `{column}` and so on in the table's texts. */
	words?: Record<string, string>;
	/** Locks that the statement itself names (LOCK TABLE … IN … MODE). */
	named?: { mode: LockMode; on: string }[];
	/** Said before the table's text on load. */
	note?: string;
	/** EXPLAIN ANALYZE: what it carries out decides, but it is called by its own name. */
	shownAs?: string;
}

/** Why a statement is not understood, as a sentence. */
export interface NotUnderstood {
	why: string;
}

export type Classified = Finding[] | NotUnderstood;

/** The name as a person writes it: schema.table. */
export function nameOf(relation: RangeVar | undefined): string {
	if (relation?.relname === undefined) return 'the table';
	return relation.schemaname === undefined ? relation.relname : `${relation.schemaname}.${relation.relname}`;
}

/** Names of a list of strings: `{ List: { items: [String…] } }` or the items themselves. */
export function nameOfList(nodes: readonly Node[] | undefined): string {
	return (nodes ?? []).map(textOf).join('.');
}

/** The text of a String node or of a List of them; empty for anything else. */
export function textOf(node: Node): string {
	if ('String' in node) return node.String.sval ?? '';
	if ('List' in node) return nameOfList(node.List.items);
	if ('TypeName' in node) return nameOfList(node.TypeName.names);
	return '';
}

/** Names of RangeVar nodes. */
export function relationsOf(nodes: readonly Node[] | undefined): string[] {
	return (nodes ?? []).flatMap((node) => ('RangeVar' in node ? [nameOf(node.RangeVar)] : []));
}

/** Whether an option is given and not switched off: `(ANALYZE)`, `(FULL true)`, `(FREEZE on)`. */
export function hasOption(options: readonly Node[] | undefined, name: string): boolean {
	return (options ?? []).some(
		(node) => 'DefElem' in node && node.DefElem.defname === name && isOn(node.DefElem.arg)
	);
}

function isOn(value: Node | undefined): boolean {
	if (value === undefined) return true;
	if ('Boolean' in value) return value.Boolean.boolval === true;
	if ('Integer' in value) return (value.Integer.ival ?? 0) !== 0;
	return !['false', 'off', 'no', '0'].includes(textOf(value).toLowerCase());
}

const WRITING = ['InsertStmt', 'UpdateStmt', 'DeleteStmt', 'MergeStmt'] as const;

/** A writing statement: its tag in the tree, and the figures that decide its row in the table. */
export interface Write {
	tag: (typeof WRITING)[number];
	table: string;
	hasCondition: boolean;
	/** INSERT … ON CONFLICT: may change rows that are there. */
	onConflict: boolean;
}

/** What a walk over a statement meets. */
export interface Met {
	/** Tables, views and so on, common table expressions left out. */
	relations: string[];
	/** Functions by name, with the schema where one is written. */
	functions: string[];
	/** Statements in it that write, itself or data-modifying common table expressions. */
	writes: Write[];
	/** Makes a table: SELECT … INTO. */
	into: string | null;
	/** FOR UPDATE and its kind: the tables named, or all. */
	locksRows: boolean;
}

/** Walks a statement's whole tree and collects what matters for its effect. */
export function walkStatement(root: unknown): Met {
	const met: Met = { relations: [], functions: [], writes: [], into: null, locksRows: false };
	const expressions = new Set<string>();
	const visit = (value: unknown): void => {
		if (Array.isArray(value)) return value.forEach(visit);
		if (typeof value !== 'object' || value === null) return;
		for (const [key, inner] of Object.entries(value)) meet(key, inner, met, expressions, visit);
	};
	visit(root);
	met.relations = [...new Set(met.relations)].filter((name) => name !== '' && !expressions.has(name));
	met.functions = [...new Set(met.functions)];
	return met;
}

function meet(
	key: string,
	inner: unknown,
	met: Met,
	expressions: Set<string>,
	visit: (value: unknown) => void
) {
	if (key === 'CommonTableExpr') expressions.add(memberText(inner, 'ctename'));
	if (key === 'RangeVar' || key === 'relation') met.relations.push(relationName(inner));
	if (key === 'LockingClause') {
		// The names in it are aliases, not relations.
		met.locksRows = true;
		return;
	}
	if (key === 'intoClause') {
		met.into = relationName(memberOf(inner, 'rel'));
		return;
	}
	if (key === 'FuncCall') met.functions.push(functionName(memberOf(inner, 'funcname')));
	const tag = WRITING.find((writing) => writing === key);
	if (tag !== undefined) {
		met.writes.push({
			tag,
			table: relationName(memberOf(inner, 'relation')),
			hasCondition: memberOf(inner, 'whereClause') !== undefined,
			onConflict: memberOf(inner, 'onConflictClause') !== undefined
		});
	}
	visit(inner);
}

function memberOf(value: unknown, name: string): unknown {
	return typeof value === 'object' && value !== null ? (value as Record<string, unknown>)[name] : undefined;
}

function memberText(value: unknown, name: string): string {
	const text = memberOf(value, name);
	return typeof text === 'string' ? text : '';
}

function relationName(value: unknown): string {
	const schema = memberText(value, 'schemaname');
	return schema === '' ? memberText(value, 'relname') : `${schema}.${memberText(value, 'relname')}`;
}

/** A function's name; `pg_catalog.` is left out, any other schema stays before it. */
function functionName(parts: unknown): string {
	const names = Array.isArray(parts) ? parts.map((part) => memberText(memberOf(part, 'String'), 'sval')) : [];
	return (names[0] === 'pg_catalog' ? names.slice(1) : names).join('.');
}
