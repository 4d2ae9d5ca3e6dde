import type { PlanOperator } from '../../reading/operator';
import { phraseOperator } from '../../reading/operator-phrase';
import type { Symptom } from '../../reading/reading';
import { formatRows, formatTimes } from '../../sizing/units';
import { toFigures } from '../figures';
import type { PlanTree } from '../plan-tree';
import type { RuleInput, SymptomRule } from '../symptom';
import type { Threshold } from '../threshold';
import { weighFactor } from '../weight';

export const LEAST_BUILD_RATIO: Threshold = {
	name: 'rows hashed for each row probing',
	value: 3,
	unit: 'times',
	why: 'Hashing pays for the smaller side; a little more is normal where the larger side has no usable order.'
};
export const LEAST_BUILD_ROWS: Threshold = {
	name: 'rows hashed',
	value: 10_000,
	unit: 'rows',
	why: 'Fewer are hashed in a few milliseconds, whichever side they are on.'
};

/** Hash joins that hashed the larger side. */
export const buildSideLarger: SymptomRule = {
	ids: ['build-side-larger'],
	find({ tree }: RuleInput): Symptom[] {
		return tree.operators.flatMap((hash) => findIn(hash, tree));
	}
};

function findIn(hash: PlanOperator, tree: PlanTree): Symptom[] {
	const join = hash.kind === 'hash-build' ? tree.parentOf(hash) : null;
	const probe = join?.children.find((child) => child.facts.role === 'outer');
	const built = hash.actualRows;
	if (join === null || probe === undefined || built === null || probe.actualRows === null) return [];
	// A probing side that was stopped early says nothing of its size.
	if (tree.mayStopEarly(probe) || built < LEAST_BUILD_ROWS.value) return [];
	const ratio = built / Math.max(1, probe.actualRows);
	if (ratio < LEAST_BUILD_RATIO.value) return [];
	return [
		{
			id: 'build-side-larger',
			operator: hash.path,
			weight: weighFactor(ratio, built),
			figures: toFigures({
				buildRows: built,
				probeRows: probe.actualRows,
				ratio: Math.round(ratio * 10) / 10
			}),
			summary: `The ${phraseOperator(join)} hashed ${formatRows(built)} rows to look up ${formatRows(probe.actualRows)}: ${formatTimes(ratio)} as many.`
		}
	];
}
