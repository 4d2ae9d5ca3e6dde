/**
 * Widths of rows from what was really written, where statistics may be stale or a guess. A figure is only taken where the
 * evidence agrees with itself.
 */
import type { MemoryLayout } from './layout';
import { BLOCK_BYTES, BYTES_PER_KB } from './units';

/** Each row in a batch file: its hash value and the tuple, whose first word is its length. */
const HASH_VALUE_BYTES = 4;
/** How far rows may be from spreading evenly over batches. */
const EVENNESS = 0.08;
/** How far a memory limit may be overrun or missed when a table is split: batches differ a little. */
const LIMIT_TOLERANCE = 0.03;

export interface HashEvidence {
	rows: number;
	batches: number;
	plannedBatches: number;
	buckets: number;
	/** The largest size that the table had, kB. */
	peakKb: number;
	/** Blocks that the build side wrote. */
	writtenBlocks: number;
	/** What the table was allowed, kB; null: not known. */
	limitKb: number | null;
}

/** Average data width of the rows hashed, bytes; null where what was written does not agree with the table's size. */
export function observeHashWidth(layout: MemoryLayout, evidence: HashEvidence): number | null {
	if (evidence.rows <= 0 || evidence.writtenBlocks <= 0 || evidence.batches < 2) return null;
	return evidence.batches === evidence.plannedBatches
		? fromPlannedBatches(layout, evidence)
		: fromGrownBatches(layout, evidence);
}

function widthAt(layout: MemoryLayout, { rows, writtenBlocks }: HashEvidence, batches: number): number {
	const writtenRows = rows * ((batches - 1) / batches);
	return (writtenBlocks * BLOCK_BYTES) / writtenRows - HASH_VALUE_BYTES - layout.minimalTupleHeaderBytes;
}

function tableBytes(
	layout: MemoryLayout,
	evidence: HashEvidence,
	batches: number,
	widthBytes: number
): number {
	const tupleBytes = layout.hashTupleOverheadBytes + layout.minimalTupleHeaderBytes + widthBytes;
	return (evidence.rows / batches) * tupleBytes + layout.pointerBytes * evidence.buckets;
}

/** All rows but one batch's were written once; the peak tells whether they spread evenly. */
function fromPlannedBatches(layout: MemoryLayout, evidence: HashEvidence): number | null {
	const width = widthAt(layout, evidence, evidence.batches);
	const expected = tableBytes(layout, evidence, evidence.batches, width);
	const even = Math.abs(expected / (evidence.peakKb * BYTES_PER_KB) - 1) <= EVENNESS;
	return width > 0 && even ? width : null;
}

/**
 * How often the batches had doubled when the table was complete is not printed (later batches may double again). The number is
 * right if the table fitted its limit with it, and would not have fitted with half as many.
 */
function fromGrownBatches(layout: MemoryLayout, evidence: HashEvidence): number | null {
	if (evidence.limitKb === null) return null;
	const limitBytes = evidence.limitKb * BYTES_PER_KB;
	// A later batch that comes out a little larger may double them once more; several doublings are skew.
	const fewest = Math.max(2, evidence.plannedBatches, evidence.batches / 2);
	for (let batches = fewest; batches <= evidence.batches; batches *= 2) {
		const width = widthAt(layout, evidence, batches);
		if (width <= 0) continue;
		const fitted = tableBytes(layout, evidence, batches, width) <= limitBytes * (1 + LIMIT_TOLERANCE);
		const hadToSplit =
			batches === evidence.plannedBatches ||
			tableBytes(layout, evidence, batches / 2, width) > limitBytes * (1 - LIMIT_TOLERANCE);
		if (fitted && hadToSplit) return width;
	}
	return null;
}

/** Share of a sort's file that is rows: the rest are the blocks' trailers (logtape.c, 16 of 8,192 bytes). */
const ROW_SHARE_OF_FILE = 8176 / 8192;

/** Bytes that a sort wrote for an average row; null where either is missing. */
export function observeSortedBytes(diskKb: number, rows: number): number | null {
	return diskKb > 0 && rows > 0 ? (diskKb * BYTES_PER_KB * ROW_SHARE_OF_FILE) / rows : null;
}
