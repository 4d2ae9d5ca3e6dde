/**
 * Hash join sizing by the engine's own rule: ExecChooseHashTableSize in nodeHash.c, formulas and checks in DESIGN.md.
 */
import { LEAST_WORK_MEM_KB, maxAlign, pow2Ceil, pow2Floor, type MemoryLayout } from './layout';
import { BLOCK_BYTES, BYTES_PER_KB } from './units';

/** MaxAllocSize: one allocation never exceeds 1 GB - 1. */
const MAX_ALLOC_BYTES = 0x3fffffff;
/** SKEW_HASH_MEM_PERCENT: share set aside for the commonest values of the probing side. */
const SKEW_SHARE = 0.02;
/** Fewest buckets that a hash table starts with. */
const LEAST_BUCKETS = 1024;
/** The planner's guess where it has no rows at all. */
const GUESSED_ROWS = 1000;

export interface HashInput {
	/** Rows of the build side (all processes together where the table is shared). */
	rows: number;
	/** Average data width of a row, bytes. */
	widthBytes: number;
	workMemKb: number;
	hashMemMultiplier: number;
	/** Processes sharing one table: a parallel-aware hash join's workers + 1; 1 otherwise. */
	participants: number;
	/** One hash key with statistics on the probing column: 2 % are set aside. True unless it is known not to be. */
	skewPossible: boolean;
}

export interface HashPlan {
	buckets: number;
	batches: number;
	/** What the table may grow to before batches double, bytes (for all participants together). */
	spaceBytes: number;
	/** True where the participants' allowances were combined into one shared table. */
	combined: boolean;
}

/** Bytes that the planner reckons for one row in the table. */
export function hashTupleBytes(layout: MemoryLayout, widthBytes: number): number {
	return layout.hashTupleOverheadBytes + layout.minimalTupleHeaderBytes + maxAlign(widthBytes);
}

/** Buckets and batches that the engine plans for the rows expected. */
export function chooseHashTable(layout: MemoryLayout, input: HashInput): HashPlan {
	const budgetBytes = Math.floor(input.workMemKb * input.hashMemMultiplier * BYTES_PER_KB);
	if (input.participants > 1) {
		const shared = chooseWithin(layout, input, budgetBytes * input.participants);
		if (shared.batches === 1) return { ...shared, combined: true };
	}
	return { ...chooseWithin(layout, input, budgetBytes), combined: false };
}

function chooseWithin(
	layout: MemoryLayout,
	input: HashInput,
	spaceBytes: number
): Omit<HashPlan, 'combined'> {
	const rows = input.rows <= 0 ? GUESSED_ROWS : input.rows;
	const tupleBytes = hashTupleBytes(layout, input.widthBytes);
	const innerBytes = rows * tupleBytes;
	const budgetBytes = spaceBytes - (input.skewPossible ? skewBytes(layout, spaceBytes, tupleBytes) : 0);
	const mostBuckets = pow2Floor(Math.min(spaceBytes, MAX_ALLOC_BYTES) / layout.pointerBytes);
	const buckets = pow2Ceil(Math.max(LEAST_BUCKETS, Math.min(Math.ceil(rows), mostBuckets)));
	if (innerBytes + layout.pointerBytes * buckets <= budgetBytes) return { buckets, batches: 1, spaceBytes };

	const batchBuckets = Math.min(pow2Ceil(budgetBytes / (tupleBytes + layout.pointerBytes)), mostBuckets);
	const forTuplesBytes = Math.max(1, budgetBytes - layout.pointerBytes * batchBuckets);
	const batches = pow2Ceil(Math.max(2, Math.ceil(innerBytes / forTuplesBytes)));
	const plan = { buckets: batchBuckets, batches, spaceBytes };
	return layout.balancesBatches ? balanceBatches(plan) : plan;
}

/** Bytes set aside for the skew table; 0 where not even one value would fit. */
function skewBytes(layout: MemoryLayout, spaceBytes: number, tupleBytes: number): number {
	const share = spaceBytes * SKEW_SHARE;
	const perValueBytes = tupleBytes + 8 * layout.pointerBytes + 4 + 2 * layout.pointerBytes;
	return Math.floor(share / perValueBytes) > 0 ? share : 0;
}

/** 18 and newer: while the batch files' buffers would outweigh the table, fewer batches and a larger table. */
function balanceBatches(plan: Omit<HashPlan, 'combined'>): Omit<HashPlan, 'combined'> {
	let { buckets, batches, spaceBytes } = plan;
	while (batches > 1 && batches >= spaceBytes / BLOCK_BYTES) {
		batches /= 2;
		buckets *= 2;
		spaceBytes *= 2;
	}
	return { buckets, batches, spaceBytes };
}

/** kB that a table of one batch takes: rows with their headers, and the bucket array. */
export function hashNeededKb(layout: MemoryLayout, rows: number, widthBytes: number): number {
	const buckets = pow2Ceil(Math.max(LEAST_BUCKETS, rows));
	return (rows * hashTupleBytes(layout, widthBytes) + layout.pointerBytes * buckets) / BYTES_PER_KB;
}

/** The smallest work_mem (kB) at which the engine plans one batch for these rows. */
export function hashWorkMemKb(layout: MemoryLayout, input: Omit<HashInput, 'workMemKb'>): number {
	const share = (input.skewPossible ? 1 - SKEW_SHARE : 1) * input.hashMemMultiplier * input.participants;
	const fits = (workMemKb: number) => chooseHashTable(layout, { ...input, workMemKb }).batches === 1;
	let kb = Math.max(
		LEAST_WORK_MEM_KB,
		Math.floor(hashNeededKb(layout, Math.max(input.rows, 1), input.widthBytes) / share)
	);
	// The closed form is off by a kB or so (whole values in the skew table, rounding): walk to the edge.
	while (kb > LEAST_WORK_MEM_KB && fits(kb - 1)) kb--;
	while (!fits(kb)) kb++;
	return kb;
}

/** Bytes that the batches after the first write once: each row with its length and hash value (4 + t_len). */
export function hashTemporaryBytes(
	layout: MemoryLayout,
	batches: number,
	rows: number,
	widthBytes: number
): number {
	return ((batches - 1) / batches) * rows * (4 + layout.minimalTupleHeaderBytes + widthBytes);
}
