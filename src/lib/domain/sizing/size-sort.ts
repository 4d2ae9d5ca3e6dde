import type { PlanOperator, SortFacts } from '../reading/operator';
import type { OperatorSizing } from '../reading/reading';
import { allocSetChunkBytes, LEAST_WORK_MEM_KB, maxAlign, type MemoryLayout } from './layout';
import { observeSortedBytes } from './observed-widths';
import type { MemoryGiven } from './operator-memory';
import { MEASURED_MARGIN } from './size-hash-join';
import { rowsHeld, sortChunkBytes, sortDiskBytes, sortTupleBytes, tupleBytesFromDisk } from './sort';
import { BYTES_PER_KB } from './units';

/** Rows of different lengths are rounded up to 8 bytes one by one, by 3.5 on average. */
const MEAN_ROUNDING_BYTES = 3.5;
/** A process may get this much more of a parallel scan in the next run than it got in this one. */
const SHARE_MARGIN = 1.1;
/** Where one process comes too late, the others share the scan, block by block and so not quite evenly. */
const ABSENT_MARGIN = 1.04;
/** On tape a single column sorted without tuples is its value and a length word. */
const LENGTH_WORD_BYTES = 4;
/** Columns by value are sorted so from 15 on, others from some later version on: 18 does, 15 does not (both seen). */
const FIRST_DATUM_SORTS = 15;
const FIRST_REFERENCE_DATUM_SORTS = 16;

/** Where a sort stands in its plan. */
export interface SortPlace {
	/** Rows of its input, over all processes and loops. */
	inputRows: number;
	/** A LIMIT above reaches it, so that it may keep the best rows only. */
	underLimit: boolean;
}

/** The work_mem at which a sort that went to disk stays in memory, in each of the processes that sort. */
export function sizeSort(sort: PlanOperator, place: SortPlace, given: MemoryGiven): OperatorSizing | null {
	const { sorts } = sort.facts;
	const onDisk = sorts.filter((each) => each.onDisk);
	const processes = sort.kind === 'sort' ? sorts.length : 1;
	if (onDisk.length === 0 || sort.width === null) return null;
	const bytes = bytesPerRow(sort, place, given.layout);
	const rows =
		sort.kind === 'sort'
			? rowsOfOneProcess(sort, place, processes)
			: rowsOfLargestGroup(onDisk, sortTupleBytes(given.layout, sort.width));
	const neededKb = ((rows + 1) * bytes) / BYTES_PER_KB;
	const shared = processes > 1 ? ` for one process fewer than the ${processes} that shared the rows` : '';
	return {
		operator: sort.path,
		kind: 'sort',
		neededKb: Math.ceil(neededKb),
		givenKb: sort.memoryLimitKb,
		setting: {
			name: 'work_mem',
			valueKb: Math.max(LEAST_WORK_MEM_KB, Math.ceil(neededKb * MEASURED_MARGIN))
		},
		batches: null,
		basis: `Smallest work_mem that holds the rows${shared}, from their number and their size on disk (tuplesort.c, layout of ${given.layout.version}, ${given.layout.pointerBytes * 8}-bit).`
	};
}

/** Memory of one row: its slot in the sort array and its chunk. */
function bytesPerRow(sort: PlanOperator, place: SortPlace, layout: MemoryLayout): number {
	const planned = sortTupleBytes(layout, sort.width ?? 0);
	const written = writtenPerRow(sort, place, planned, layout);
	if (written === null) return layout.sortSlotBytes + chunkBytes(layout, planned, place.underLimit);
	const datumBytes = datumChunkBytes(sort, written, layout, place.underLimit);
	if (datumBytes !== null) return layout.sortSlotBytes + datumBytes;
	return layout.sortSlotBytes + chunkBytes(layout, tupleBytesFromDisk(written), place.underLimit);
}

function chunkBytes(layout: MemoryLayout, tupleBytes: number, bounded: boolean): number {
	if (bounded || layout.sortChunkHeaderBytes === null) return allocSetChunkBytes(layout, tupleBytes);
	const even = maxAlign(Math.round(tupleBytes));
	return layout.sortChunkHeaderBytes + Math.max(even, tupleBytes + MEAN_ROUNDING_BYTES);
}

/** Bytes on disk for a row; null where the sort ran more than once, or its processes cannot be told apart. */
function writtenPerRow(
	sort: PlanOperator,
	place: SortPlace,
	plannedTupleBytes: number,
	layout: MemoryLayout
): number | null {
	const { sorts } = sort.facts;
	if (sort.kind !== 'sort' || (sort.loops ?? 1) > sorts.length) return null;
	const diskKb = sumKb(sorts.filter((each) => each.onDisk));
	const perRowInMemory = layout.sortSlotBytes + sortChunkBytes(layout, plannedTupleBytes, place.underLimit);
	const inMemoryRows = (sumKb(sorts.filter((each) => !each.onDisk)) * BYTES_PER_KB) / perRowInMemory;
	return observeSortedBytes(diskKb, place.inputRows - inMemoryRows);
}

/**
 * Memory beside its slot of a single column that is sorted without tuples: none by value, else the value. Told by the bytes on tape,
 * which leave out the tuple's header; null: it is a sort of tuples.
 */
function datumChunkBytes(
	sort: PlanOperator,
	writtenBytes: number,
	layout: MemoryLayout,
	bounded: boolean
): number | null {
	const width = sort.width ?? 0;
	if (layout.version < FIRST_DATUM_SORTS || sort.facts.sortKey.length !== 1) return null;
	const asTuple = sortDiskBytes(layout, 1, width);
	const isNearer = (asDatum: number) => Math.abs(writtenBytes - asDatum) < Math.abs(writtenBytes - asTuple);
	if (width >= 4 && width <= 8 && isNearer(LENGTH_WORD_BYTES + layout.pointerBytes)) return 0;
	if (layout.version < FIRST_REFERENCE_DATUM_SORTS) return null;
	return isNearer(LENGTH_WORD_BYTES + width)
		? chunkBytes(layout, writtenBytes - LENGTH_WORD_BYTES, bounded)
		: null;
}

/**
 * Processes share rows out block by block, differently in each run, and workers start late: sized for one process fewer than
 * took part, or for the largest share that was seen.
 */
function rowsOfOneProcess(sort: PlanOperator, place: SortPlace, processes: number): number {
	if (processes <= 1) {
		const loops = Math.max(1, sort.loops ?? 1);
		const bound = place.underLimit ? sort.facts.actualRowsPerLoop : null;
		return rowsHeld({ rows: place.inputRows / loops, bound });
	}
	const sorts = sort.facts.sorts;
	const largest = Math.max(...sorts.map((each) => each.usedKb ?? 0)) / Math.max(1, sumKb(sorts));
	return (
		place.inputRows *
		Math.max(Math.min(1, ABSENT_MARGIN / (processes - 1)), Math.min(1, largest * SHARE_MARGIN))
	);
}

/** An incremental sort holds one group at a time; the largest is known by its file. */
function rowsOfLargestGroup(onDisk: readonly SortFacts[], tupleBytes: number): number {
	const diskKb = Math.max(...onDisk.map((each) => each.usedKb ?? 0));
	return (diskKb * BYTES_PER_KB) / Math.max(1, tupleBytes - tupleBytesFromDisk(0));
}

function sumKb(sorts: readonly SortFacts[]): number {
	return sorts.reduce((sum, each) => sum + (each.usedKb ?? 0), 0);
}
