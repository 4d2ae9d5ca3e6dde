/**
 * The one operator tree of every engine. Formats read into PlanOperator; the Reading that leaves the domain
 * carries Operator, the same tree without the facts that only rules need.
 */
export const OPERATOR_KINDS = [
	'seq-scan',
	'index-scan',
	'index-only-scan',
	'bitmap-scan',
	'bitmap-index',
	'lookup',
	'hash-join',
	'merge-join',
	'nested-loop',
	'hash-build',
	'sort',
	'incremental-sort',
	'hash-aggregate',
	'group-aggregate',
	'window',
	'materialize',
	'memoize',
	'append',
	'limit',
	'unique',
	'set-op',
	'gather',
	'exchange',
	'cte-scan',
	'subquery',
	'function-scan',
	'values',
	'modify',
	'temp-table',
	'filter',
	'other'
] as const;
export type OperatorKind = (typeof OPERATOR_KINDS)[number];

/** One operator of a plan. Every figure that the evidence does not hold is null, never 0. */
export interface Operator {
	/** Child indexes from the root: "0", "0.1", "0.1.0". */
	path: string;
	kind: OperatorKind;
	/** The engine's own words: "Hash Left Join", "Seq Scan". */
	name: string;
	relation: string | null;
	alias: string | null;
	/** The condition that tells this operator from others, literals masked. */
	condition: string | null;
	/** Rows over all loops and workers: the estimate multiplied by the loops. */
	estimatedRows: number | null;
	/** Rows over all loops and workers. */
	actualRows: number | null;
	loops: number | null;
	/** Average width of a row, bytes. */
	width: number | null;
	/** Own time over all loops, children taken off, ms. */
	selfMs: number | null;
	/** Time over all loops with children, ms. */
	totalMs: number | null;
	/** Peak memory, kB. */
	memoryKb: number | null;
	/** What the engine allows this operator, kB. */
	memoryLimitKb: number | null;
	batches: number | null;
	plannedBatches: number | null;
	/** Bytes that this operator itself wrote to temporary files (children taken off). */
	temporaryBytes: number | null;
	/** Rows read and thrown away by a condition, over all loops. */
	discardedRows: number | null;
	/** Actual ÷ expected, both at least 1; null where the operator was cut short and the two cannot be compared. */
	ratio: number | null;
	/** The larger of ratio and its inverse. */
	qError: number | null;
	children: Operator[];
}

/** Temporary-file and memory figures of one process at a sort or an aggregate. */
export interface SortFacts {
	/** The engine's words: "external merge", "quicksort", "top-N heapsort". */
	method: string | null;
	onDisk: boolean;
	/** Size in memory or on disk, kB. */
	usedKb: number | null;
	/** "leader", "worker 0", "full-sort groups", "pre-sorted groups". */
	who: string;
}

export interface HashFacts {
	buckets: number | null;
	plannedBuckets: number | null;
	batches: number | null;
	plannedBatches: number | null;
	peakKb: number | null;
}

export interface AggregateFacts {
	plannedPartitions: number | null;
	batches: number | null;
	peakKb: number | null;
	diskKb: number | null;
	who: string;
}

export interface MemoizeFacts {
	hits: number | null;
	misses: number | null;
	evictions: number | null;
	overflows: number | null;
	peakKb: number | null;
}

/** Everything else an engine prints of an operator. Null: not in the evidence. */
export interface OperatorFacts {
	/** Rows of one loop as the engine prints them. */
	plannedRowsPerLoop: number | null;
	actualRowsPerLoop: number | null;
	neverExecuted: boolean;
	/** How this child hangs under its parent: outer, inner, member, subquery, init-plan, sub-plan, cte. */
	role: 'outer' | 'inner' | 'member' | 'subquery' | 'init-plan' | 'sub-plan' | 'cte' | null;
	/** "CTE recent", "InitPlan 1 (returns $0)". */
	subplanName: string | null;
	/** inner, left, full, right, semi, anti, right-anti, right-semi. */
	joinType: string | null;
	/** plain, sorted, hashed, mixed. */
	strategy: string | null;
	/** simple, partial, finalize. */
	partialMode: string | null;
	parallelAware: boolean;
	innerUnique: boolean | null;
	schema: string | null;
	indexName: string | null;
	cteName: string | null;
	functionName: string | null;
	/** Conditions as printed (masked), each under one name. */
	filter: string | null;
	joinFilter: string | null;
	indexCondition: string | null;
	recheckCondition: string | null;
	hashCondition: string | null;
	mergeCondition: string | null;
	otherConditions: string[];
	sortKey: string[];
	presortedKey: string[];
	groupKey: string[];
	/** Per loop, as printed. */
	removedByFilter: number | null;
	removedByJoinFilter: number | null;
	removedByRecheck: number | null;
	heapFetches: number | null;
	exactBlocks: number | null;
	lossyBlocks: number | null;
	workersPlanned: number | null;
	workersLaunched: number | null;
	/** Blocks, children included, over all loops. */
	sharedHitBlocks: number | null;
	sharedReadBlocks: number | null;
	tempReadBlocks: number | null;
	tempWrittenBlocks: number | null;
	/** Temp blocks written by this operator itself. */
	ownTempWrittenBlocks: number | null;
	ownTempReadBlocks: number | null;
	sorts: SortFacts[];
	hash: HashFacts | null;
	aggregates: AggregateFacts[];
	memoize: MemoizeFacts | null;
	/** What a tuple store of its own used: Memory or Disk, kB (PostgreSQL 18). */
	storage: { onDisk: boolean; maximumKb: number | null } | null;
	/** Anything that a later reader may want, under the engine's own key, as text. */
	extra: Record<string, string>;
}

/** An operator with the facts that rules read. */
export interface PlanOperator extends Operator {
	facts: OperatorFacts;
	children: PlanOperator[];
}

/** Facts with nothing known: a format fills in what its engine prints. */
export function noFacts(): OperatorFacts {
	return {
		plannedRowsPerLoop: null,
		actualRowsPerLoop: null,
		neverExecuted: false,
		role: null,
		subplanName: null,
		joinType: null,
		strategy: null,
		partialMode: null,
		parallelAware: false,
		innerUnique: null,
		schema: null,
		indexName: null,
		cteName: null,
		functionName: null,
		filter: null,
		joinFilter: null,
		indexCondition: null,
		recheckCondition: null,
		hashCondition: null,
		mergeCondition: null,
		otherConditions: [],
		sortKey: [],
		presortedKey: [],
		groupKey: [],
		removedByFilter: null,
		removedByJoinFilter: null,
		removedByRecheck: null,
		heapFetches: null,
		exactBlocks: null,
		lossyBlocks: null,
		workersPlanned: null,
		workersLaunched: null,
		sharedHitBlocks: null,
		sharedReadBlocks: null,
		tempReadBlocks: null,
		tempWrittenBlocks: null,
		ownTempWrittenBlocks: null,
		ownTempReadBlocks: null,
		sorts: [],
		hash: null,
		aggregates: [],
		memoize: null,
		storage: null,
		extra: {}
	};
}

/** The operators of a tree in the order in which the engine prints them. */
export function* walkOperators<T extends { children: T[] }>(root: T): Generator<T> {
	const stack: T[] = [root];
	for (let next = stack.pop(); next !== undefined; next = stack.pop()) {
		yield next;
		for (let i = next.children.length - 1; i >= 0; i--) {
			const child = next.children[i];
			if (child !== undefined) stack.push(child);
		}
	}
}
