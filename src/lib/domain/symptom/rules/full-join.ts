import type { PlanOperator } from '../../reading/operator';
import type { Symptom } from '../../reading/reading';
import { formatRows } from '../../sizing/units';
import { toFigures } from '../figures';
import type { PlanTree } from '../plan-tree';
import type { RuleInput, SymptomRule } from '../symptom';
import type { Threshold } from '../threshold';
import { weighRows } from '../weight';
import { hasIndexAccess } from './repeated-inner-scan';

export const LEAST_PAIRS: Threshold = {
	name: 'pairs of rows without a join condition',
	value: 1_000_000,
	unit: 'rows',
	why: 'A product of small sides is often meant (a calendar times a list); a million pairs seldom are.'
};
export const LEAST_SIDE: Threshold = {
	name: 'rows on the smaller side',
	value: 100,
	unit: 'rows',
	why: 'A handful of rows (a parameter row, a total) is joined to everything on purpose.'
};

/**
 * Joins of everything with everything. PostgreSQL prints no word for them: only a nested loop that gives back the whole
 * product of its sides, with no condition on either the join or an index, is certain.
 */
export const fullJoin: SymptomRule = {
	ids: ['full-join'],
	find({ tree }: RuleInput): Symptom[] {
		return tree.operators.flatMap((join) => (join.kind === 'nested-loop' ? findProduct(join, tree) : []));
	}
};

function findProduct(join: PlanOperator, tree: PlanTree): Symptom[] {
	const outer = join.children.find((child) => child.facts.role === 'outer');
	const inner = join.children.find((child) => child.facts.role === 'inner');
	if (outer === undefined || inner === undefined || join.facts.joinFilter !== null) return [];
	if (hasIndexAccess(inner) || tree.mayStopEarly(join)) return [];
	const outerRows = outer.actualRows ?? 0;
	const innerRows = inner.facts.actualRowsPerLoop ?? 0;
	const pairs = outerRows * innerRows;
	if (pairs < LEAST_PAIRS.value || Math.min(outerRows, innerRows) < LEAST_SIDE.value) return [];
	if (join.actualRows !== pairs) return [];
	return [
		{
			id: 'full-join',
			operator: join.path,
			weight: weighRows(pairs),
			figures: toFigures({ outerRows, innerRows, rows: pairs }),
			summary: `A nested loop without any join condition paired ${formatRows(outerRows)} rows with ${formatRows(innerRows)}: ${formatRows(pairs)} rows.`
		}
	];
}
