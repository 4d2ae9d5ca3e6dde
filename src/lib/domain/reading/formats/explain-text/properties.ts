import type { PlanNode } from '../postgres/plan-node';
import { takeBuffers, takeTimings } from './buffers';
import { takeMemory } from './memory-properties';
import { splitList } from './split-list';

const LISTS = new Set(['Sort Key', 'Presorted Key', 'Output']);

/** Puts a property line ("Key: value") into a node, or into one of its workers, under the keys of the JSON form. */
export function takeProperty(key: string, value: string, into: PlanNode, node: PlanNode): void {
	switch (key) {
		case 'Buffers':
			takeBuffers(value, into);
			return;
		case 'I/O Timings':
			takeTimings(value, into);
			return;
		case 'WAL':
			return;
		case 'Group Key':
		case 'Hash Key':
			takeGroupKey(key, value, node);
			return;
		case 'Heap Blocks':
			for (const [, name, blocks] of value.matchAll(/\b(exact|lossy)=(\d+)/g)) {
				into[name === 'exact' ? 'Exact Heap Blocks' : 'Lossy Heap Blocks'] = blocks;
			}
			return;
		case 'Storage': {
			const storage = /^(\w+)\s+Maximum Storage: (\d+)kB/.exec(value);
			into['Storage'] = storage?.[1] ?? value;
			if (storage?.[2] !== undefined) into['Maximum Storage'] = storage[2];
			return;
		}
	}
	if (takeMemory(key, value, into, node)) return;
	if (LISTS.has(key)) {
		// The phases of grouping sets print their sort keys below the aggregate, which has none itself.
		if (key !== 'Sort Key' || node['Node Type'] !== 'Aggregate') into[key] = splitList(value);
	} else into[key] = value;
}

/** One line is the list of keys; several lines are grouping sets, each a key of its own. */
function takeGroupKey(key: string, value: string, node: PlanNode): void {
	const sets = Array.isArray(node['Group Sets']) ? node['Group Sets'] : [];
	sets.push(value);
	node['Group Sets'] = sets;
	node['Group Key'] = sets.length === 1 && key === 'Group Key' && value !== '()' ? splitList(value) : sets;
}
