import type { PlanOperator } from '../reading/operator';
import type { OperatorSizing } from '../reading/reading';
import { hashNeededKb, hashWorkMemKb } from './hash';
import { maxAlign, pow2Ceil, type MemoryLayout } from './layout';
import { observeHashWidth } from './observed-widths';
import type { MemoryGiven } from './operator-memory';
import { BYTES_PER_KB } from './units';

/** What measured widths may be off by, batches being uneven and files whole blocks. */
export const MEASURED_MARGIN = 1.02;
/**
 * The same where batches doubled while the table was built: rows that moved were written again, so that the width is
 * less sure (a running PostgreSQL 18 still split at 1.02 of it, depending on what ANALYZE had sampled).
 */
const GROWN_MARGIN = 1.05;
/** The planner's rows and width come from a sample that the next ANALYZE draws anew: they move by a few per cent. */
const PLANNED_MARGIN = 1.02;
/** Each process of a shared table takes its memory in chunks (HASH_CHUNK_SIZE). */
const SHARED_CHUNK_KB = 32;

/** Where a hash table stands in its plan. */
export interface HashPlace {
	/** Parallel workers planned for the part of the plan that it is in; 0: none. */
	workersPlanned: number;
}

/**
 * The work_mem at which a hash table that spilled stays in one batch: the planner must plan one (its rows and width), and the
 * real rows must fit as they come.
 */
export function sizeHashJoin(
	hash: PlanOperator,
	place: HashPlace,
	given: MemoryGiven
): OperatorSizing | null {
	const { facts } = hash;
	if (facts.actualRowsPerLoop === null || facts.plannedRowsPerLoop === null || hash.width === null)
		return null;
	const { layout, hashMemMultiplier } = given;
	const shared = facts.parallelAware;
	const participants = shared ? place.workersPlanned + 1 : 1;
	const plannedRows = facts.plannedRowsPerLoop * (shared ? parallelDivisor(place.workersPlanned) : 1);
	const rows = shared ? (hash.actualRows ?? 0) : facts.actualRowsPerLoop;
	const plannedKb = hashWorkMemKb(layout, {
		rows: plannedRows,
		widthBytes: hash.width,
		hashMemMultiplier,
		participants,
		skewPossible: true
	});
	const observed = shared ? null : observe(hash, given);
	const width = observed ?? maxAlign(hash.width);
	const tupleBytes = layout.hashTupleOverheadBytes + layout.minimalTupleHeaderBytes + width;
	const buckets = pow2Ceil(Math.max(1024, rows, Math.min(plannedRows, rows * 4)));
	const tableKb =
		(rows * (shared ? maxAlign(tupleBytes) : tupleBytes) + layout.pointerBytes * buckets) / BYTES_PER_KB +
		(shared ? SHARED_CHUNK_KB * participants : 0);
	const grown = (facts.hash?.batches ?? 1) > (facts.hash?.plannedBatches ?? facts.hash?.batches ?? 1);
	const margin = observed !== null && grown ? GROWN_MARGIN : MEASURED_MARGIN;
	const fittingKb = (tableKb * margin) / hashMemMultiplier / participants;
	return {
		operator: hash.path,
		kind: 'hash',
		neededKb: Math.ceil(Math.max(tableKb, hashNeededKb(layout, plannedRows, hash.width))),
		givenKb: hash.memoryLimitKb,
		setting: { name: 'work_mem', valueKb: Math.ceil(Math.max(plannedKb * PLANNED_MARGIN, fittingKb)) },
		batches: facts.hash?.batches ?? null,
		basis: sayBasis(plannedKb >= fittingKb, observed !== null, participants, layout)
	};
}

/** How many processes the planner reckons a parallel scan is shared by: the leader helps less the more workers there are (get_parallel_divisor). */
function parallelDivisor(workers: number): number {
	return workers + Math.max(0, 1 - 0.3 * workers);
}

function observe(hash: PlanOperator, { layout }: MemoryGiven): number | null {
	const { facts } = hash;
	const table = facts.hash;
	if (
		table === null ||
		table.batches === null ||
		table.peakKb === null ||
		facts.ownTempWrittenBlocks === null
	)
		return null;
	const loops = Math.max(1, hash.loops ?? 1);
	return observeHashWidth(layout, {
		rows: facts.actualRowsPerLoop ?? 0,
		batches: table.batches,
		plannedBatches: table.plannedBatches ?? table.batches,
		buckets: table.buckets ?? 1024,
		peakKb: table.peakKb,
		writtenBlocks: facts.ownTempWrittenBlocks / loops,
		limitKb: hash.memoryLimitKb
	});
}

function sayBasis(byPlanner: boolean, observed: boolean, participants: number, layout: MemoryLayout): string {
	const rows = byPlanner
		? 'the rows and width that the planner expects'
		: `the rows that came${observed ? ' and their width as written' : ', their width rounded up'}`;
	const shared = participants > 1 ? `, shared by ${participants} processes` : '';
	return `Smallest work_mem for one batch, from ${rows}${shared} (nodeHash.c, layout of ${layout.version}, ${layout.pointerBytes * 8}-bit).`;
}
