import { walkOperators, type Operator, type OperatorKind } from '../operator';

/** An operator with what it means in its plan, whatever its path. */
export interface PlacedOperator {
	operator: Operator;
	parent: PlacedOperator | null;
	/** Kinds that do the same job share it: however a table is read, it is read. */
	job: string;
	/** What tells it from others with the same job: its table, its condition, its keys; empty: nothing does. */
	identity: string;
	/** Stands for the tables below it, in whatever order they are joined. */
	reads: string;
	/** How many tables are read below it. */
	tables: number;
}

const JOBS: Partial<Record<OperatorKind, string>> = {
	'seq-scan': 'access',
	'index-scan': 'access',
	'index-only-scan': 'access',
	'bitmap-scan': 'access',
	'hash-join': 'join',
	'merge-join': 'join',
	'nested-loop': 'join',
	sort: 'sort',
	'incremental-sort': 'sort',
	'hash-aggregate': 'aggregate',
	'group-aggregate': 'aggregate',
	unique: 'aggregate'
};

/** Leaves of a plan. A lookup fetches more of a table that is read already. */
const READS: readonly OperatorKind[] = ['cte-scan', 'function-scan', 'values', 'temp-table'];

/** The job of an operator: "access", "join", "sort", "aggregate", or its own kind. */
export function jobOf({ kind }: Pick<Operator, 'kind'>): string {
	return JOBS[kind] ?? kind;
}

/** All operators of a plan in the order in which the engine prints them, each with its meaning. One walk. */
export function placeOperators(root: Operator): PlacedOperator[] {
	const placed: PlacedOperator[] = [];
	const byOperator = new Map<Operator, PlacedOperator>();
	const parents = new Map<Operator, Operator>();
	for (const operator of walkOperators(root)) {
		for (const child of operator.children) parents.set(child, operator);
		const above = parents.get(operator);
		const parent = above === undefined ? null : (byOperator.get(above) ?? null);
		const one = {
			operator,
			parent,
			job: jobOf(operator),
			identity: identify(operator),
			reads: '',
			tables: 0
		};
		placed.push(one);
		byOperator.set(operator, one);
	}
	gatherReads(placed);
	return placed;
}

/**
 * The tables below each operator, as sums of their names' hashes: a set that costs one addition a level. Two
 * sums of 32 bits make a chance meeting of different sets unlikely enough for a plan of 20,000 operators.
 */
function gatherReads(placed: readonly PlacedOperator[]): void {
	const sums = new Map<PlacedOperator, [number, number]>();
	// Backwards, children come before their parents.
	for (const one of placed.toReversed()) {
		const sum = sums.get(one) ?? [0, 0];
		if (readsSomething(one)) {
			const name = nameOf(one.operator);
			sum[0] = (sum[0] + hash(name, 0x811c9dc5)) >>> 0;
			sum[1] = (sum[1] + hash(name, 0x9e3779b9)) >>> 0;
			one.tables += 1;
		}
		one.reads = `${sum[0]}.${sum[1]}`;
		if (one.parent === null) continue;
		const above = sums.get(one.parent) ?? [0, 0];
		sums.set(one.parent, [(above[0] + sum[0]) >>> 0, (above[1] + sum[1]) >>> 0]);
		one.parent.tables += one.tables;
	}
}

function readsSomething({ operator, job }: PlacedOperator): boolean {
	return operator.relation !== null && (job === 'access' || READS.includes(operator.kind));
}

/** Under which name a plan speaks of a table; a table that is joined to itself has two. */
function nameOf({ relation, alias }: Operator): string {
	return (alias ?? relation ?? '').toLowerCase();
}

function identify(operator: Operator): string {
	const { relation, condition } = operator;
	if (relation !== null) return `${relation.toLowerCase()} ${nameOf(operator)}`;
	if (condition === null) return '';
	switch (jobOf(operator)) {
		case 'join':
			return orderCondition(condition);
		case 'aggregate':
			// The order of the keys is the planner's choice.
			return condition.split(', ').toSorted().join(', ');
		default:
			return condition;
	}
}

/** A condition whatever its brackets, the order of its parts and the side on which a column stands. */
export function orderCondition(condition: string): string {
	return condition
		.replaceAll(/[()]/g, '')
		.split(/\s+AND\s+/i)
		.map((part) => part.trim().split(' = ').toSorted().join(' = '))
		.toSorted()
		.join(' AND ');
}

/** FNV-1a over the text's code units, from a start of its own. */
function hash(text: string, start: number): number {
	let value = start;
	for (let at = 0; at < text.length; at++) value = Math.imul(value ^ text.charCodeAt(at), 0x01000193);
	return value >>> 0;
}
