import type { Symptom } from '../../reading/reading';
import { formatRows } from '../../sizing/units';
import { toFigures } from '../figures';
import type { RuleInput, SymptomRule } from '../symptom';
import type { Threshold } from '../threshold';
import { weighRows } from '../weight';

export const LEAST_BROUGHT: Threshold = {
	name: 'rows brought to the limit',
	value: 10_000,
	unit: 'rows',
	why: 'Skipping fewer costs a few milliseconds.'
};
export const MOST_RETURNED_SHARE: Threshold = {
	name: 'share given back',
	value: 0.01,
	unit: 'share',
	why: 'From page 100 on nearly all work is thrown away, and each page costs more than the one before.'
};

/** Limits that skip nearly everything brought to them. */
export const deepOffset: SymptomRule = {
	ids: ['deep-offset'],
	find({ tree }: RuleInput): Symptom[] {
		return tree.operators.flatMap((operator) => {
			const brought = operator.kind === 'limit' ? (operator.children[0]?.actualRows ?? null) : null;
			const returned = operator.actualRows;
			if (brought === null || returned === null || brought < LEAST_BROUGHT.value) return [];
			if (returned > brought * MOST_RETURNED_SHARE.value) return [];
			return [
				{
					id: 'deep-offset' as const,
					operator: operator.path,
					weight: weighRows(brought),
					figures: toFigures({ brought, returned }),
					summary: `${formatRows(brought)} rows were brought to the limit and ${formatRows(returned)} given back: the offset skipped the others.`
				}
			];
		});
	}
};
