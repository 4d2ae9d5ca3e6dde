import type { PlanNode } from '../postgres/plan-node';

/** Node types as the text form begins a line with them; the longest match counts. */
const TYPES = [
	'Seq Scan',
	'Sample Scan',
	'Index Scan',
	'Index Only Scan',
	'Bitmap Heap Scan',
	'Bitmap Index Scan',
	'BitmapAnd',
	'BitmapOr',
	'Tid Scan',
	'Tid Range Scan',
	'Subquery Scan',
	'Function Scan',
	'Table Function Scan',
	'Values Scan',
	'CTE Scan',
	'Named Tuplestore Scan',
	'WorkTable Scan',
	'Foreign Scan',
	'Custom Scan',
	'Result',
	'ProjectSet',
	'Append',
	'Merge Append',
	'Recursive Union',
	'Nested Loop',
	'Merge Join',
	'Hash Join',
	'Hash',
	'Sort',
	'Incremental Sort',
	'Group',
	'WindowAgg',
	'Unique',
	'Gather',
	'Gather Merge',
	'LockRows',
	'Limit',
	'Materialize',
	'Memoize',
	'Result Cache'
];
const KNOWN = new Set(TYPES);

const AGGREGATE = /^(?:(Partial|Finalize) )?(Aggregate|GroupAggregate|HashAggregate|MixedAggregate)$/;
const STRATEGIES: Record<string, string> = {
	Aggregate: 'Plain',
	GroupAggregate: 'Sorted',
	HashAggregate: 'Hashed',
	MixedAggregate: 'Mixed'
};
const JOIN = /^(Hash|Merge|Nested Loop)(?: (Left|Right|Full|Semi|Anti|Right Anti|Right Semi))? Join$/;
const SET_OP = /^(HashSetOp|SetOp)(?: (.+))?$/;
const OPERATIONS = /^(Insert|Update|Delete|Merge)$/;
const FOREIGN = /^Foreign (Insert|Update|Delete)$/;
const CUSTOM = /^Custom Scan \((.+)\)$/;

/**
 * Takes the name of a text line apart into the keys of the JSON form: "Parallel Hash Left Join" into Node Type,
 * Join Type and Parallel Aware. False: no operator has this name.
 */
export function takeName(name: string, node: PlanNode): boolean {
	let rest = name;
	if (rest.startsWith('Parallel ')) {
		node['Parallel Aware'] = true;
		rest = rest.slice('Parallel '.length);
	}
	if (rest.startsWith('Async ')) {
		node['Async Capable'] = true;
		rest = rest.slice('Async '.length);
	}
	node['Node Type'] = rest;
	if (rest === 'Hash Join' || rest === 'Merge Join' || rest === 'Nested Loop') node['Join Type'] = 'Inner';
	return KNOWN.has(rest) || takeFolded(rest, node);
}

function takeFolded(rest: string, node: PlanNode): boolean {
	const aggregate = AGGREGATE.exec(rest);
	if (aggregate !== null) {
		node['Node Type'] = 'Aggregate';
		node['Strategy'] = STRATEGIES[aggregate[2] ?? ''];
		node['Partial Mode'] = aggregate[1] ?? 'Simple';
		return true;
	}
	const join = JOIN.exec(rest);
	if (join !== null) {
		node['Node Type'] = join[1] === 'Nested Loop' ? 'Nested Loop' : `${join[1]} Join`;
		node['Join Type'] = join[2] ?? 'Inner';
		return true;
	}
	const setOp = SET_OP.exec(rest);
	if (setOp !== null) {
		node['Node Type'] = 'SetOp';
		node['Strategy'] = setOp[1] === 'HashSetOp' ? 'Hashed' : 'Sorted';
		if (setOp[2] !== undefined) node['Command'] = setOp[2];
		return true;
	}
	return takeOperation(rest, node);
}

function takeOperation(rest: string, node: PlanNode): boolean {
	if (OPERATIONS.test(rest)) {
		node['Node Type'] = 'ModifyTable';
		node['Operation'] = rest;
		return true;
	}
	const foreign = FOREIGN.exec(rest);
	if (foreign !== null) {
		node['Node Type'] = 'Foreign Scan';
		node['Operation'] = foreign[1];
		return true;
	}
	const custom = CUSTOM.exec(rest);
	if (custom !== null) {
		node['Node Type'] = 'Custom Scan';
		node['Custom Plan Provider'] = custom[1];
		return true;
	}
	return false;
}

/** How the child at a position hangs under its parent; the text form doesn't say it in words. */
export function relationshipOf(parentType: unknown, index: number): string {
	switch (parentType) {
		case 'Append':
		case 'Merge Append':
		case 'BitmapAnd':
		case 'BitmapOr':
			return 'Member';
		case 'Subquery Scan':
			return 'Subquery';
		default:
			return index === 0 ? 'Outer' : 'Inner';
	}
}

/** How many ordinary children a node has; null where it varies (Append, ModifyTable). */
export function childrenOf(type: unknown): number | null {
	switch (type) {
		case 'Hash Join':
		case 'Merge Join':
		case 'Nested Loop':
		case 'Recursive Union':
			return 2;
		case 'Append':
		case 'Merge Append':
		case 'BitmapAnd':
		case 'BitmapOr':
		case 'SetOp':
		case 'ModifyTable':
		case 'Result':
		case 'Custom Scan':
			return null;
		case 'Bitmap Heap Scan':
		case 'Subquery Scan':
			return 1;
		default:
			return typeof type === 'string' && type.endsWith('Scan') ? 0 : 1;
	}
}
