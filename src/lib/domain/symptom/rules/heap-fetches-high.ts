import { phraseOperator } from '../../reading/operator-phrase';
import type { Symptom } from '../../reading/reading';
import { formatRows } from '../../sizing/units';
import { toFigures } from '../figures';
import type { RuleInput, SymptomRule } from '../symptom';
import type { Threshold } from '../threshold';
import { weighRows } from '../weight';

export const LEAST_FETCHES: Threshold = {
	name: 'heap fetches',
	value: 1000,
	unit: 'fetches',
	why: 'A few hundred visits to the table are a matter of milliseconds.'
};
export const LEAST_FETCH_SHARE: Threshold = {
	name: 'heap fetches against rows',
	value: 0.1,
	unit: 'share',
	why: 'Recently changed pages always need some; a tenth means that the visibility map is behind.'
};

/** Index-only scans that had to visit the table after all. */
export const heapFetchesHigh: SymptomRule = {
	ids: ['heap-fetches-high'],
	find({ tree }: RuleInput): Symptom[] {
		return tree.operators.flatMap((operator) => {
			const fetches = operator.facts.heapFetches;
			if (operator.kind !== 'index-only-scan' || fetches === null || fetches < LEAST_FETCHES.value) return [];
			const rows = operator.actualRows ?? 0;
			if (fetches < rows * LEAST_FETCH_SHARE.value) return [];
			return [
				{
					id: 'heap-fetches-high' as const,
					operator: operator.path,
					weight: weighRows(fetches),
					figures: toFigures({ fetches, rows, relation: operator.relation, index: operator.facts.indexName }),
					summary: `The ${phraseOperator(operator)} visited the table ${formatRows(fetches)} times for ${formatRows(rows)} rows.`
				}
			];
		});
	}
};
