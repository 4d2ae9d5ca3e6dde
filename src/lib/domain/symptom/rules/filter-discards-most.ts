import type { PlanOperator } from '../../reading/operator';
import { phraseOperator } from '../../reading/operator-phrase';
import type { Symptom } from '../../reading/reading';
import { formatRows } from '../../sizing/units';
import { toFigures } from '../figures';
import type { RuleInput, SymptomRule } from '../symptom';
import type { Threshold } from '../threshold';
import { weighRows } from '../weight';

export const LEAST_READ: Threshold = {
	name: 'rows read',
	value: 10_000,
	unit: 'rows',
	why: 'Reading fewer takes a few milliseconds; an index would hardly be felt.'
};
export const LEAST_DISCARDED_SHARE: Threshold = {
	name: 'share thrown away',
	value: 0.99,
	unit: 'share',
	why: 'One row in a hundred or fewer is what an index finds with less work than a scan.'
};
export const MOST_LOOPS_SUMMED: Threshold = {
	name: 'loops taken together',
	value: 8,
	unit: 'loops',
	why: 'A few loops are the processes of a parallel scan, which share one table; many are repetitions, each judged on its own.'
};

/** Whether an operator is a scan: it reads a table, an index, a function or a stored result itself. */
export function isScan(operator: PlanOperator): boolean {
	return operator.name.endsWith('Scan') && operator.name !== 'Bitmap Index Scan';
}

export interface Discard {
	read: number;
	kept: number;
	removed: number;
}

/** What a scan's own filter threw away; null where it has none or the figures are missing. `perLoop`: of one loop. */
export function readDiscard(operator: PlanOperator, perLoop: boolean): Discard | null {
	const { removedByFilter, actualRowsPerLoop } = operator.facts;
	if (!isScan(operator) || removedByFilter === null || actualRowsPerLoop === null || removedByFilter === 0)
		return null;
	const times = perLoop ? 1 : (operator.loops ?? 1);
	const removed = removedByFilter * times;
	const kept = actualRowsPerLoop * times;
	return { read: removed + kept, kept, removed };
}

/** Scans that read much and keep next to nothing. */
export const filterDiscardsMost: SymptomRule = {
	ids: ['filter-discards-most'],
	find({ tree }: RuleInput): Symptom[] {
		return tree.operators.flatMap((operator) => {
			const loops = operator.loops ?? 1;
			const found = readDiscard(operator, loops > MOST_LOOPS_SUMMED.value);
			if (found === null || found.read < LEAST_READ.value) return [];
			if (found.removed / found.read < LEAST_DISCARDED_SHARE.value) return [];
			const repeated = loops > MOST_LOOPS_SUMMED.value ? ` in each of ${formatRows(loops)} loops` : '';
			return [
				{
					id: 'filter-discards-most' as const,
					operator: operator.path,
					weight: weighRows((operator.facts.removedByFilter ?? 0) * loops),
					figures: toFigures({
						read: found.read,
						kept: found.kept,
						share: Math.round((found.removed / found.read) * 10_000) / 10_000,
						loops: loops > 1 ? loops : null,
						relation: operator.relation,
						condition: operator.facts.filter
					}),
					summary: `The ${phraseOperator(operator)} read ${formatRows(found.read)} rows and kept ${formatRows(found.kept)}${repeated}.`
				}
			];
		});
	}
};
