import type { PlanNode } from '../postgres/plan-node';

/** "shared hit=1 read=2, local …, temp read=3 written=4": counters that are zero are not printed. */
export function takeBuffers(value: string, into: PlanNode): void {
	let group = '';
	for (const [, name, counter, blocks] of value.matchAll(
		/\b(shared|local|temp)\b|\b(hit|read|dirtied|written)=(\d+)/g
	)) {
		if (name !== undefined) group = capitalise(name);
		else if (counter !== undefined) into[`${group} ${capitalise(counter)} Blocks`] = blocks;
	}
	into['Buffers'] = true;
}

/** "shared read=0.1 write=0.2, temp read=…"; before 15 without the group's name. */
export function takeTimings(value: string, into: PlanNode): void {
	into[value.includes('temp ') ? 'Temp I/O Read Time' : 'I/O Read Time'] = '0';
}

function capitalise(word: string): string {
	return word.charAt(0).toUpperCase() + word.slice(1);
}

const COUNTERS = ['Shared Hit Blocks', 'Shared Read Blocks', 'Temp Read Blocks', 'Temp Written Blocks'];

/** Where any node of a plan counted its blocks, all did: what is not printed is zero. */
export function fillZeroBlocks(nodes: PlanNode[]): void {
	const counted = nodes.some((node) => node['Buffers'] === true);
	for (const node of nodes) {
		delete node['Buffers'];
		if (counted) for (const key of COUNTERS) node[key] ??= 0;
	}
}
