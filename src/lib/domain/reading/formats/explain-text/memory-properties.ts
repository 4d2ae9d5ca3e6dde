import { isRecord, type PlanNode } from '../postgres/plan-node';

/** Takes the lines that speak of memory and files of a hash, a sort, an aggregate or a memo; false: none of them. */
export function takeMemory(key: string, value: string, into: PlanNode, node: PlanNode): boolean {
	switch (key) {
		case 'Sort Method':
			takeSort(value, into);
			return true;
		case 'Full-sort Groups':
		case 'Pre-sorted Groups':
			into[key] = sortGroups(value);
			return true;
		case 'Buckets':
			takeHash(`Buckets: ${value}`, into);
			return true;
		case 'Batches':
		case 'Planned Partitions':
			if (node['Node Type'] === 'Hash') takeHash(`${key}: ${value}`, into);
			else takeAggregate(`${key}: ${value}`, into);
			return true;
		case 'Memory Usage':
		case 'Disk Usage':
			takeAggregate(`${key}: ${value}`, into);
			return true;
		case 'Hits':
			takeMemo(`Hits: ${value}`, into);
			return true;
		default:
			return false;
	}
}

/** "external merge  Disk: 22632kB", "quicksort  Memory: 32kB", "still in progress" */
function takeSort(value: string, into: PlanNode): void {
	const space = /^(.*?)\s+(Disk|Memory): (\d+)kB/.exec(value);
	into['Sort Method'] = space?.[1] ?? value.trim();
	if (space !== null) {
		into['Sort Space Type'] = space[2];
		into['Sort Space Used'] = space[3];
	}
}

/** "1  Sort Methods: quicksort, external merge  Average Memory: 19kB  Peak Memory: 19kB  Average Disk: …" */
function sortGroups(value: string): PlanNode {
	const methods = /Sort Methods?: (.*?)(?:\s{2,}|\s+Average |$)/.exec(value)?.[1] ?? '';
	const group: PlanNode = {
		'Group Count': /^\d+/.exec(value)?.[0],
		'Sort Methods Used': methods.split(', ')
	};
	for (const [, extent, space, kb] of value.matchAll(/(Average|Peak) (Memory|Disk): (\d+)kB/g)) {
		const spaceKey = `Sort Space ${space}`;
		const known = group[spaceKey];
		const sizes: PlanNode = isRecord(known) ? known : {};
		sizes[`${extent} Sort Space Used`] = kb;
		group[spaceKey] = sizes;
	}
	return group;
}

/** "Buckets: 16384 (originally 1024)  Batches: 32 (originally 4)  Memory Usage: 385kB" */
function takeHash(text: string, into: PlanNode): void {
	for (const [, key, final, planned] of text.matchAll(
		/(Buckets|Batches): (\d+)(?: \(originally (\d+)\))?/g
	)) {
		into[`Hash ${key}`] = final;
		into[`Original Hash ${key}`] = planned ?? final;
	}
	const memory = /Memory Usage: (\d+)kB/.exec(text);
	if (memory !== null) into['Peak Memory Usage'] = memory[1];
}

/** "Planned Partitions: 4  Batches: 5  Memory Usage: 4145kB  Disk Usage: 200kB"; zeros are not printed. */
function takeAggregate(text: string, into: PlanNode): void {
	const partitions = /Planned Partitions: (\d+)/.exec(text);
	const batches = /\bBatches: (\d+)/.exec(text);
	const memory = /Memory Usage: (\d+)kB/.exec(text);
	const disk = /Disk Usage: (\d+)kB/.exec(text);
	if (partitions !== null) into['Planned Partitions'] = partitions[1];
	if (memory !== null) into['Peak Memory Usage'] = memory[1];
	if (batches !== null) {
		into['HashAgg Batches'] = batches[1];
		into['Disk Usage'] ??= 0;
	}
	if (disk !== null) into['Disk Usage'] = disk[1];
}

/** "Hits: 1999  Misses: 1000  Evictions: 0  Overflows: 0  Memory Usage: 128kB" */
function takeMemo(text: string, into: PlanNode): void {
	for (const [, key, count] of text.matchAll(/(Hits|Misses|Evictions|Overflows): (\d+)/g))
		into[`Cache ${key}`] = count;
	const memory = /Memory Usage: (\d+)kB/.exec(text);
	if (memory !== null) into['Peak Memory Usage'] = memory[1];
}
