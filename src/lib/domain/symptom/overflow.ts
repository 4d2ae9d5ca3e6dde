import type { PlanOperator } from '../reading/operator';
import { formatBytes } from '../sizing/units';
import { countOf } from './figures';
import type { PlanTree } from './plan-tree';
import { hasAggregateSpilled } from './rules/aggregate-spill';
import { hashTemporaryBytesOf, hasSpilled } from './rules/hash-spill';
import { storedBytes } from './rules/materialize-spill';
import { hasSortedOnDisk, sortDiskKb } from './rules/sort-spill';

/** What an operator did when its memory was full. A hash table's overflow is its join's. */
export interface Overflow {
	kind: 'hash' | 'sort' | 'aggregate' | 'materialize';
	/** null: not in the evidence. */
	bytes: number | null;
	/** "8 batches, 55 MB of temporary files" */
	words: string;
}

/** How an operator overflowed; null: it did not. */
export function findOverflow(operator: PlanOperator, tree: PlanTree): Overflow | null {
	if (operator.kind === 'hash-join') {
		const hash = operator.children.find((child) => child.kind === 'hash-build');
		return hash !== undefined && hasSpilled(hash)
			? batched('hash', hash.facts.hash?.batches ?? null, hashTemporaryBytesOf(hash, tree))
			: null;
	}
	if (hasAggregateSpilled(operator)) {
		const batches = Math.max(...operator.facts.aggregates.map((each) => each.batches ?? 0));
		return batched('aggregate', batches, operator.temporaryBytes);
	}
	if (hasSortedOnDisk(operator)) {
		return batched('sort', null, operator.temporaryBytes ?? sortDiskKb(operator) * 1024);
	}
	const bytes = storedBytes(operator);
	return bytes > 0 ? batched('materialize', null, bytes) : null;
}

function batched(kind: Overflow['kind'], batches: number | null, bytes: number | null): Overflow {
	const parts: string[] = [];
	if (batches !== null && batches > 1) parts.push(countOf(batches, 'batch', 'batches'));
	if (bytes !== null && bytes > 0) parts.push(`${formatBytes(bytes)} of temporary files`);
	return { kind, bytes, words: parts.join(', ') };
}
