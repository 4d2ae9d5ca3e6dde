import type { PlanOperator } from '../reading/operator';
import type { OperatorSizing } from '../reading/reading';
import { aggregateNeededKb, plannedEntryBytes, plannedPartitions } from './aggregate';
import { guessGroupShape } from './aggregate-states';
import { LEAST_WORK_MEM_KB } from './layout';
import type { MemoryGiven } from './operator-memory';
import { BLOCK_BYTES, BYTES_PER_KB } from './units';

/** A process of a parallel aggregate may meet more groups in the next run than on average in this one. */
const SHARE_MARGIN = 1.15;
/** Whole context blocks are counted; what is left is how full the bucket array gets. */
const MARGIN = 1.02;
const LEAST_LIMIT_SHARE = 0.75;

/** The work_mem at which a hash aggregate that spilled keeps its groups in memory. */
export function sizeAggregate(aggregate: PlanOperator, given: MemoryGiven): OperatorSizing | null {
	const { actualRowsPerLoop, plannedRowsPerLoop, groupKey } = aggregate.facts;
	const inputBytes = aggregate.children[0]?.width ?? null;
	if (actualRowsPerLoop === null || inputBytes === null || aggregate.width === null) return null;
	const { layout, hashMemMultiplier } = given;
	const parallel = aggregate.facts.aggregates.length > 1;
	const groups = actualRowsPerLoop * (parallel ? SHARE_MARGIN : 1);
	const shape = guessGroupShape({
		inputBytes,
		outputBytes: aggregate.width,
		keys: Math.max(1, groupKey.length)
	});
	const entryBytes = plannedEntryBytes(layout, inputBytes);
	// The engine also stops at as many groups as would fit by its own reckoning, whatever they really take.
	const neededKb = Math.max(
		aggregateNeededKb(layout, groups, shape, hashMemMultiplier),
		(groups * entryBytes) / BYTES_PER_KB
	);
	const limitKb = findLimitKb(neededKb * MARGIN, plannedRowsPerLoop ?? 0, entryBytes);
	return {
		operator: aggregate.path,
		kind: 'aggregate',
		neededKb: Math.ceil(neededKb),
		givenKb: aggregate.memoryLimitKb,
		setting: {
			name: 'work_mem',
			valueKb: Math.max(LEAST_WORK_MEM_KB, Math.ceil(limitKb / hashMemMultiplier))
		},
		batches: Math.max(0, ...aggregate.facts.aggregates.map((each) => each.batches ?? 0)) || null,
		basis: `Smallest work_mem that holds all groups${parallel ? ' of one process' : ''}; what the aggregates keep for each group is judged by the widths (nodeAgg.c, layout of ${given.layout.version}, ${given.layout.pointerBytes * 8}-bit).`
	};
}

/** hash_mem (kB) at which the run-time limit reaches the need: where partitions are planned, their buffers are taken off it. */
function findLimitKb(neededKb: number, plannedGroups: number, entryBytes: number): number {
	let hashMemKb = neededKb;
	for (let round = 0; round < 8; round++) {
		const partitions = plannedPartitions(plannedGroups, entryBytes, hashMemKb);
		if (partitions === 0) return hashMemKb;
		const buffersKb = ((partitions + 1) * BLOCK_BYTES) / BYTES_PER_KB;
		const limitKb = hashMemKb > 4 * buffersKb ? hashMemKb - buffersKb : hashMemKb * LEAST_LIMIT_SHARE;
		if (limitKb >= neededKb) return hashMemKb;
		hashMemKb += neededKb - limitKb;
	}
	return hashMemKb;
}
