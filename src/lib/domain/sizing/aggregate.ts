/**
 * Hash aggregate sizing (nodeAgg.c, 13 and newer). What counts against the limit is what the memory contexts took from the
 * system: the bucket array, and for each group its key tuple, its transition values and, for some aggregates, a state of their own.
 */
import {
	allocSetChunkBytes,
	LEAST_WORK_MEM_KB,
	maxAlign,
	pow2Ceil,
	pow2Floor,
	type MemoryLayout
} from './layout';
import { BLOCK_BYTES, BYTES_PER_KB } from './units';

/**
 * Load at which the bucket array doubles. 0.9 on paper, but the table also grows as soon as one entry lies 25 buckets from home
 * (SH_GROW_MAX_DIB): with random hashes that happened between 0.72 (2^20 buckets) and 0.8 (2^14) in 12 simulated tables of each size.
 */
const GROWTH_LOAD = 0.72;
const LEAST_BUCKETS = 256;
/** Contexts start at 8 kB and double to a sixteenth of work_mem, 8 MB at most (CreateWorkExprContext). */
const FIRST_CONTEXT_BLOCK_KB = 8;
const MOST_CONTEXT_BLOCK_KB = 8192;
/** The contexts' own first blocks; 25 to 41 kB seen on 15.18. */
const CONTEXT_OVERHEAD_KB = 41;

/** HASHAGG_PARTITION_FACTOR, _MIN_, _MAX_PARTITIONS and the buffers of one partition's tape. */
const PARTITION_FACTOR = 1.5;
const LEAST_PARTITIONS = 4;
const MOST_PARTITIONS = 1024;

export interface GroupShape {
	/** Data width of the grouping columns (with the other columns kept for the output), bytes. */
	keyBytes: number;
	/** Transition values of one group: different aggregates of the list. */
	transitions: number;
	/** Transition states that live outside the values: numeric sums, text. */
	states: readonly StateShape[];
}

/** Payloads of the chunks that one by-reference transition state takes, in a 64-bit and in a 32-bit build. */
export interface StateShape {
	bytes64: readonly number[];
	bytes32: readonly number[];
}

/** sum or avg over numeric: NumericAggState and its two digit buffers. */
export const NUMERIC_STATE: StateShape = { bytes64: [144, 16, 16], bytes32: [120, 16, 16] };
/** sum over bigint, avg over integers: Int128AggState or an array of two. */
export const INTEGER_STATE: StateShape = { bytes64: [64], bytes32: [64] };
/** string_agg: StringInfoData and its first buffer of 1,024 bytes with the terminating zero. */
export const TEXT_STATE: StateShape = { bytes64: [24, 1024], bytes32: [16, 1024] };
/** Where a pointer has 4 bytes, bigint, double and timestamp results are kept by reference too. */
const NARROW_STATE_32 = 8;

/** Bytes of one group's key tuple and transition values. */
export function groupBytes(layout: MemoryLayout, shape: GroupShape): number {
	const tupleBytes = layout.minimalTupleHeaderBytes + shape.keyBytes;
	const perGroupBytes = shape.transitions * layout.perGroupStateBytes;
	if (layout.aggregateBump) return maxAlign(tupleBytes) + maxAlign(perGroupBytes);
	const values = perGroupBytes > 0 ? allocSetChunkBytes(layout, perGroupBytes) : 0;
	return allocSetChunkBytes(layout, tupleBytes) + values;
}

/** Bytes of one group's states outside that. */
export function stateBytes(layout: MemoryLayout, shape: GroupShape): number {
	const wide = layout.pointerBytes === 8;
	const payloads = shape.states.flatMap((state) => (wide ? state.bytes64 : state.bytes32));
	const narrow = wide ? 0 : shape.transitions - shape.states.length;
	return payloads.reduce(
		(sum, bytes) => sum + allocSetChunkBytes(layout, bytes),
		narrow * allocSetChunkBytes(layout, NARROW_STATE_32)
	);
}

/** Bytes of the bucket array for so many groups. */
export function bucketArrayBytes(layout: MemoryLayout, groups: number): number {
	return Math.max(LEAST_BUCKETS, pow2Ceil(groups / GROWTH_LOAD)) * layout.aggregateBucketBytes;
}

/** The memory limit (hash_mem, kB) under which all groups stay in memory, whole context blocks counted. */
export function aggregateNeededKb(
	layout: MemoryLayout,
	groups: number,
	shape: GroupShape,
	hashMemMultiplier: number
): number {
	const arrayKb = bucketArrayBytes(layout, groups) / BYTES_PER_KB;
	const groupsKb = (groups * groupBytes(layout, shape)) / BYTES_PER_KB;
	const statesKb = (groups * stateBytes(layout, shape)) / BYTES_PER_KB;
	const workMemKb = Math.max(LEAST_WORK_MEM_KB, (arrayKb + groupsKb + statesKb) / hashMemMultiplier);
	// One context holds both, unless tuples have a bump context to themselves.
	const contexts = layout.aggregateBump ? [groupsKb, statesKb] : [groupsKb + statesKb];
	return contexts.reduce(
		(sum, usedKb) => sum + toContextBlocksKb(usedKb, workMemKb),
		arrayKb + CONTEXT_OVERHEAD_KB
	);
}

/** Memory that a context takes from the system for so many kB of chunks: blocks that double up to their largest, then whole ones of that. */
function toContextBlocksKb(usedKb: number, workMemKb: number): number {
	const largestKb = Math.min(
		MOST_CONTEXT_BLOCK_KB,
		Math.max(FIRST_CONTEXT_BLOCK_KB, pow2Floor(workMemKb / 16))
	);
	let takenKb = 0;
	let blockKb = FIRST_CONTEXT_BLOCK_KB;
	while (takenKb < usedKb && blockKb <= largestKb) {
		takenKb += blockKb;
		blockKb *= 2;
	}
	return takenKb >= usedKb ? takenKb : takenKb + Math.ceil((usedKb - takenKb) / largestKb) * largestKb;
}

/** Bytes that the planner reckons for one group: 56 and the input's width (thresholds measured on 15.18 with 1 to 4 by-value aggregates). */
export function plannedEntryBytes(layout: MemoryLayout, inputWidthBytes: number): number {
	const chunk = layout.aggregateBump ? 0 : layout.allocSetHeaderBytes;
	return layout.aggregateBucketBytes + chunk + layout.minimalTupleHeaderBytes + inputWidthBytes;
}

/** Partitions planned for this many groups; 0: none, they are expected to fit. */
export function plannedPartitions(groups: number, entryBytes: number, hashMemKb: number): number {
	const limitBytes = hashMemKb * BYTES_PER_KB;
	if (groups * entryBytes <= limitBytes) return 0;
	const wanted = (PARTITION_FACTOR * groups * entryBytes) / limitBytes + 1;
	const most = Math.max(LEAST_PARTITIONS, Math.floor((0.25 * limitBytes - BLOCK_BYTES) / BLOCK_BYTES));
	return pow2Ceil(Math.min(MOST_PARTITIONS, Math.max(LEAST_PARTITIONS, Math.floor(Math.min(wanted, most)))));
}
