import type { AggregateFacts, HashFacts, MemoizeFacts, OperatorFacts, SortFacts } from '../../operator';
import { figure, isRecord, records, wordList, words, type PlanNode } from './plan-node';

type MemoryFacts = Pick<OperatorFacts, 'sorts' | 'hash' | 'aggregates' | 'memoize' | 'storage'>;

/** Memory and spill figures of a node, one entry a process where PostgreSQL prints them so. */
export function memoryFacts(node: PlanNode, type: string): MemoryFacts {
	const facts: MemoryFacts = {
		sorts: [],
		hash: null,
		aggregates: [],
		memoize: null,
		storage: storageOf(node)
	};
	if (type === 'Sort') facts.sorts = perProcess(node, sortOf);
	else if (type === 'Incremental Sort') facts.sorts = perProcess(node, incrementalSortsOf).flat();
	else if (type === 'Hash') facts.hash = hashOf(node);
	else if (type === 'Aggregate') facts.aggregates = perProcess(node, aggregateOf);
	else if (type === 'Memoize' || type === 'Result Cache') facts.memoize = memoizeOf(perProcess(node, memoOf));
	return facts;
}

function perProcess<T>(node: PlanNode, read: (part: PlanNode, who: string) => T | null): T[] {
	const found: T[] = [];
	const leader = read(node, 'leader');
	if (leader !== null) found.push(leader);
	for (const worker of records(node['Workers'])) {
		const facts = read(worker, `worker ${figure(worker['Worker Number']) ?? '?'}`);
		if (facts !== null) found.push(facts);
	}
	return found;
}

function sortOf(part: PlanNode, who: string): SortFacts | null {
	const method = words(part['Sort Method']);
	const usedKb = figure(part['Sort Space Used']);
	if (method === null && usedKb === null) return null;
	return { method, onDisk: part['Sort Space Type'] === 'Disk', usedKb, who };
}

function incrementalSortsOf(part: PlanNode, who: string): SortFacts[] | null {
	const found: SortFacts[] = [];
	for (const groups of ['Full-sort Groups', 'Pre-sorted Groups']) {
		const group = part[groups];
		if (!isRecord(group)) continue;
		const method = wordList(group['Sort Methods Used']).join(', ') || null;
		for (const [key, onDisk] of [
			['Sort Space Memory', false],
			['Sort Space Disk', true]
		] as const) {
			const space = group[key];
			if (!isRecord(space)) continue;
			const usedKb = figure(space['Peak Sort Space Used']);
			const name = groups.toLowerCase();
			found.push({ method, onDisk, usedKb, who: who === 'leader' ? name : `${name} of ${who}` });
		}
	}
	return found.length === 0 ? null : found;
}

function hashOf(node: PlanNode): HashFacts | null {
	const batches = figure(node['Hash Batches']);
	const peakKb = figure(node['Peak Memory Usage']);
	if (batches === null && peakKb === null) return null;
	return {
		buckets: figure(node['Hash Buckets']),
		plannedBuckets: figure(node['Original Hash Buckets']),
		batches,
		plannedBatches: figure(node['Original Hash Batches']),
		peakKb
	};
}

function aggregateOf(part: PlanNode, who: string): AggregateFacts | null {
	const batches = figure(part['HashAgg Batches']);
	// Planned once for all processes, so it stands at the leader; the text form leaves a zero out, COSTS OFF all.
	const planned =
		figure(part['Planned Partitions']) ?? (batches !== null && part['Plan Rows'] !== undefined ? 0 : null);
	const plannedPartitions = who === 'leader' ? planned : null;
	const peakKb = figure(part['Peak Memory Usage']);
	// The text form leaves a zero of planned partitions out; without run-time figures it says nothing.
	if (!plannedPartitions && batches === null && peakKb === null) return null;
	return { plannedPartitions, batches, peakKb, diskKb: figure(part['Disk Usage']), who };
}

function memoOf(part: PlanNode): MemoizeFacts | null {
	const hits = figure(part['Cache Hits']);
	const misses = figure(part['Cache Misses']);
	if (hits === null && misses === null) return null;
	return {
		hits,
		misses,
		evictions: figure(part['Cache Evictions']),
		overflows: figure(part['Cache Overflows']),
		peakKb: figure(part['Peak Memory Usage'])
	};
}

function memoizeOf(parts: MemoizeFacts[]): MemoizeFacts | null {
	const [first, ...rest] = parts;
	if (first === undefined) return null;
	return rest.reduce(
		(sum, part) => ({
			hits: add(sum.hits, part.hits),
			misses: add(sum.misses, part.misses),
			evictions: add(sum.evictions, part.evictions),
			overflows: add(sum.overflows, part.overflows),
			peakKb: largest([sum.peakKb, part.peakKb])
		}),
		first
	);
}

function storageOf(node: PlanNode): OperatorFacts['storage'] {
	const storage = words(node['Storage']);
	if (storage === null) return null;
	return { onDisk: storage === 'Disk', maximumKb: figure(node['Maximum Storage']) };
}

/** The sum of two figures; one that is not known counts nothing, two make null. */
export function add(a: number | null, b: number | null): number | null {
	return a === null ? b : b === null ? a : a + b;
}

/** The largest known figure, null when none is known. */
export function largest(figures: (number | null)[]): number | null {
	let most: number | null = null;
	for (const each of figures) if (each !== null && (most === null || each > most)) most = each;
	return most;
}
