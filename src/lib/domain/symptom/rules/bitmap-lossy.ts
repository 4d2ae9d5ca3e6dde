import { phraseOperator } from '../../reading/operator-phrase';
import type { Symptom } from '../../reading/reading';
import { formatRows } from '../../sizing/units';
import { toFigures } from '../figures';
import type { RuleInput, SymptomRule } from '../symptom';
import type { Threshold } from '../threshold';
import { weighRows, weighShare } from '../weight';

export const MOST_LOSSY_BLOCKS: Threshold = {
	name: 'lossy blocks',
	value: 0,
	unit: 'blocks',
	why: 'A bitmap that fits work_mem keeps every row’s place; each lossy block is read whole and all its rows are checked again (tidbitmap.c).'
};

/** Bitmaps that outgrew work_mem and remember blocks only. */
export const bitmapLossy: SymptomRule = {
	ids: ['bitmap-lossy'],
	find({ tree }: RuleInput): Symptom[] {
		return tree.operators.flatMap((operator) => {
			const lossy = operator.facts.lossyBlocks ?? 0;
			if (lossy <= MOST_LOSSY_BLOCKS.value) return [];
			const exact = operator.facts.exactBlocks ?? 0;
			const rechecked = operator.facts.removedByRecheck;
			const removed =
				rechecked === null || rechecked === 0
					? ''
					: `; ${formatRows(rechecked * (operator.loops ?? 1))} rows were read and thrown away again`;
			return [
				{
					id: 'bitmap-lossy' as const,
					operator: operator.path,
					weight: Math.max(
						weighShare((lossy / (lossy + exact)) * 0.7),
						weighRows((rechecked ?? 0) * (operator.loops ?? 1))
					),
					figures: toFigures({
						exact,
						lossy,
						share: Math.round((lossy / (lossy + exact)) * 1000) / 1000,
						rechecked
					}),
					summary: `The bitmap of the ${phraseOperator(operator)} outgrew its memory: ${formatRows(lossy)} of ${formatRows(lossy + exact)} blocks are lossy${removed}.`
				}
			];
		});
	}
};
