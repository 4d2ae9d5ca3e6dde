/**
 * Sort sizing by the engine's own rule (tuplesort.c). A tuple costs its slot in the sort array and its chunk; the array doubles
 * while there is room and grows a last time to exactly what is left, so the smallest sufficient memory is rows × (slot + chunk).
 */
import { allocSetChunkBytes, LEAST_WORK_MEM_KB, maxAlign, type MemoryLayout } from './layout';
import { BLOCK_BYTES, BYTES_PER_KB } from './units';

/** Buffer of one tape while merging: 32 blocks to read ahead and 2 of overhead (MERGE_BUFFER_SIZE, TAPE_BUFFER_OVERHEAD; 15 and newer). */
const TAPE_BLOCKS = 34;
/** MINORDER and MAXORDER: fewest and most tapes merged at once. */
const LEAST_MERGE_ORDER = 6;
const MOST_MERGE_ORDER = 500;
/** On tape a tuple keeps its length word and loses the ten bytes of header that every minimal tuple shares. */
const TAPE_LENGTH_BYTES = 4;
const TAPE_DROPPED_BYTES = 10;

export interface SortInput {
	/** Rows that one process sorts. */
	rows: number;
	/** Average data width of a row, bytes. */
	widthBytes: number;
	/** Under a LIMIT: the rows that are kept at most; null: all. */
	bound: number | null;
}

/** Bytes of one tuple in memory, chunk and header, its slot in the sort array not counted. `tupleBytes`: t_len. */
export function sortChunkBytes(layout: MemoryLayout, tupleBytes: number, bounded: boolean): number {
	if (bounded || layout.sortChunkHeaderBytes === null) return allocSetChunkBytes(layout, tupleBytes);
	return layout.sortChunkHeaderBytes + maxAlign(tupleBytes);
}

/** t_len of a row of this data width. */
export function sortTupleBytes(layout: MemoryLayout, widthBytes: number): number {
	return layout.minimalTupleHeaderBytes + widthBytes;
}

/**
 * Rows that have to fit: a bounded sort turns into a heap of the best as soon as it holds twice the bound, so never more than that.
 */
export function rowsHeld(input: Pick<SortInput, 'rows' | 'bound'>): number {
	return input.bound === null ? input.rows : Math.min(input.rows, 2 * input.bound + 1);
}

/** The smallest memory (kB) that keeps the sort in memory; for PostgreSQL also the setting. */
export function sortNeededKb(layout: MemoryLayout, input: SortInput): number {
	const chunk = sortChunkBytes(layout, sortTupleBytes(layout, input.widthBytes), input.bound !== null);
	return ((rowsHeld(input) + 1) * (layout.sortSlotBytes + chunk)) / BYTES_PER_KB;
}

/** kB that the engine prints for a sort with memory to spare: the array then stays at a power of two of slots. */
export function sortPrintedKb(layout: MemoryLayout, input: SortInput): number {
	const chunk = sortChunkBytes(layout, sortTupleBytes(layout, input.widthBytes), input.bound !== null);
	let slots = 1024;
	while (slots - 1 < input.rows) slots *= 2;
	return (input.rows * chunk + slots * layout.sortSlotBytes) / BYTES_PER_KB;
}

/** Bytes of the sorted runs on disk, block trailers aside: always well below the memory that the same rows need. */
export function sortDiskBytes(layout: MemoryLayout, rows: number, widthBytes: number): number {
	return rows * (TAPE_LENGTH_BYTES + sortTupleBytes(layout, widthBytes) - TAPE_DROPPED_BYTES);
}

/** t_len of an average row, from the bytes a sort wrote for it; the inverse of sortDiskBytes. */
export function tupleBytesFromDisk(bytesPerRow: number): number {
	return bytesPerRow - TAPE_LENGTH_BYTES + TAPE_DROPPED_BYTES;
}

/** Tapes merged at once with this much memory. */
export function mergeOrder(memoryKb: number): number {
	const order = Math.floor((memoryKb * BYTES_PER_KB) / (TAPE_BLOCKS * BLOCK_BYTES));
	return Math.min(MOST_MERGE_ORDER, Math.max(LEAST_MERGE_ORDER, order));
}

/** Merge passes at this memory; 0: the sort stays in memory. */
export function sortPasses(layout: MemoryLayout, input: SortInput, memoryKb: number): number {
	const limitKb = Math.max(LEAST_WORK_MEM_KB, memoryKb);
	const runs = Math.ceil(sortNeededKb(layout, input) / limitKb);
	if (runs <= 1) return 0;
	return Math.max(1, Math.ceil(Math.log(runs) / Math.log(mergeOrder(limitKb)) - 1e-9));
}
