import type { OperatorKind } from '../../operator';
import { isTrue, words, type PlanNode } from './plan-node';

const AGGREGATES: Record<string, string> = {
	Plain: 'Aggregate',
	Sorted: 'GroupAggregate',
	Hashed: 'HashAggregate',
	Mixed: 'MixedAggregate'
};

/**
 * The name as EXPLAIN's text form prints it ("Parallel Hash Left Join"), which folds strategy, join type and
 * operation into it; the other forms keep them apart (explain.c, ExplainNode).
 */
export function operatorName(node: PlanNode): string {
	const type = words(node['Node Type']) ?? 'Unknown';
	const parallel = isTrue(node['Parallel Aware']) ? 'Parallel ' : '';
	const asynchronous = isTrue(node['Async Capable']) ? 'Async ' : '';
	return parallel + asynchronous + bareName(type, node);
}

function bareName(type: string, node: PlanNode): string {
	switch (type) {
		case 'Aggregate': {
			const partial = words(node['Partial Mode']);
			const prefix = partial === null || partial === 'Simple' ? '' : `${partial} `;
			return prefix + (AGGREGATES[words(node['Strategy']) ?? 'Plain'] ?? 'Aggregate');
		}
		case 'SetOp': {
			const command = words(node['Command']);
			return (
				(node['Strategy'] === 'Hashed' ? 'HashSetOp' : 'SetOp') + (command === null ? '' : ` ${command}`)
			);
		}
		case 'ModifyTable':
			return words(node['Operation']) ?? type;
		case 'Foreign Scan':
			return node['Operation'] === 'Select' ? type : `Foreign ${words(node['Operation']) ?? 'Scan'}`;
		case 'Hash Join':
		case 'Merge Join':
		case 'Nested Loop':
			return joinName(type, words(node['Join Type']));
		case 'Custom Scan':
			return words(node['Custom Plan Provider']) === null
				? type
				: `Custom Scan (${words(node['Custom Plan Provider'])})`;
		default:
			return type;
	}
}

function joinName(type: string, joinType: string | null): string {
	if (joinType === null || joinType === 'Inner') return type;
	const stem = type === 'Nested Loop' ? type : type.slice(0, -' Join'.length);
	return `${stem} ${joinType} Join`;
}

const KINDS: Record<string, OperatorKind> = {
	'Seq Scan': 'seq-scan',
	'Sample Scan': 'seq-scan',
	'Tid Range Scan': 'seq-scan',
	'Index Scan': 'index-scan',
	'Index Only Scan': 'index-only-scan',
	'Bitmap Heap Scan': 'bitmap-scan',
	'Bitmap Index Scan': 'bitmap-index',
	BitmapAnd: 'bitmap-index',
	BitmapOr: 'bitmap-index',
	'Tid Scan': 'lookup',
	'Hash Join': 'hash-join',
	'Merge Join': 'merge-join',
	'Nested Loop': 'nested-loop',
	Hash: 'hash-build',
	Sort: 'sort',
	'Incremental Sort': 'incremental-sort',
	Group: 'group-aggregate',
	WindowAgg: 'window',
	Materialize: 'materialize',
	Memoize: 'memoize',
	'Result Cache': 'memoize',
	Append: 'append',
	'Merge Append': 'append',
	Limit: 'limit',
	Unique: 'unique',
	SetOp: 'set-op',
	Gather: 'gather',
	'Gather Merge': 'gather',
	'CTE Scan': 'cte-scan',
	'WorkTable Scan': 'cte-scan',
	'Subquery Scan': 'subquery',
	'Function Scan': 'function-scan',
	'Table Function Scan': 'function-scan',
	'Values Scan': 'values',
	ModifyTable: 'modify'
};

/** The kind of a node; `other` for what has no kind of its own (Result, LockRows, Recursive Union …). */
export function operatorKind(node: PlanNode): OperatorKind {
	const type = words(node['Node Type']) ?? '';
	if (type === 'Aggregate') {
		const strategy = node['Strategy'];
		return strategy === 'Hashed' || strategy === 'Mixed' ? 'hash-aggregate' : 'group-aggregate';
	}
	return Object.hasOwn(KINDS, type) ? (KINDS[type] ?? 'other') : 'other';
}
