import type { PlanOperator } from '../../reading/operator';
import { found, type CauseInput, type CauseRule } from './cause-rule';
import { statisticsAge } from './confirm';
import { findTablesBelow } from './tables';

/** Three times larger or more (the symptom), and it was expected to be the smaller side. */
const MUCH_LARGER = 0.87;
/** Larger than the probing side at all, where the error does not begin at a plain scan. */
const LARGER = 0.86;
/** Larger, but the error has a plain cause at a scan. */
const LARGER_BY_SCAN = 0.6;

/** A hash table built on the side that was wrongly believed to be the smaller. */
export const wrongBuildSide: CauseRule = (input) => {
	for (const hash of input.tree.operators) {
		if (hash.kind !== 'hash-build' || !turnedOver(hash, input)) continue;
		const [table] = findTablesBelow(hash);
		const scanned = hash.children[0]?.kind === 'seq-scan';
		return {
			id: 'wrong-build-side',
			confidence: input.has('build-side-larger') ? MUCH_LARGER : scanned ? LARGER_BY_SCAN : LARGER,
			because: found(input, ['build-side-larger', 'row-underestimate', 'hash-spill']),
			against: ['The side follows from the estimate: with a right one the planner turns it round by itself.'],
			confirm: table === undefined ? [] : [statisticsAge(table)]
		};
	}
	return null;
};

/** Whether a side expected to be the smaller one, and underestimated by far, came out larger than the other. */
function turnedOver(hash: PlanOperator, { tree }: CauseInput): boolean {
	const probe = tree.parentOf(hash)?.children.find((child) => child.facts.role === 'outer');
	if (probe === undefined || tree.mayStopEarly(probe)) return false;
	const { estimatedRows, actualRows, ratio } = hash;
	if (
		estimatedRows === null ||
		actualRows === null ||
		probe.estimatedRows === null ||
		probe.actualRows === null
	)
		return false;
	const leastError = 10;
	return (ratio ?? 0) >= leastError && estimatedRows < probe.estimatedRows && actualRows > probe.actualRows;
}
