import type { Symptom } from '../../reading/reading';
import { formatMs } from '../../sizing/units';
import { toFigures } from '../figures';
import type { RuleInput, SymptomRule } from '../symptom';
import type { Threshold } from '../threshold';
import { weighShare } from '../weight';

export const LEAST_JIT_SHARE: Threshold = {
	name: 'share of the execution time',
	value: 0.3,
	unit: 'share',
	why: 'Compiling is meant to save time; from a third on it can hardly have paid for itself.'
};
export const LEAST_JIT_MS: Threshold = {
	name: 'compile time',
	value: 100,
	unit: 'ms',
	why: 'Less is not felt by anybody.'
};

/** Statements that spent much of their time compiling. */
export const jitDominates: SymptomRule = {
	ids: ['jit-dominates'],
	find({ plan }: RuleInput): Symptom[] {
		const jitMs = plan.jit?.totalMs ?? null;
		const totalMs = plan.executionMs ?? plan.root.totalMs;
		if (jitMs === null || totalMs === null || totalMs <= 0 || jitMs < LEAST_JIT_MS.value) return [];
		const share = jitMs / totalMs;
		if (share < LEAST_JIT_SHARE.value) return [];
		return [
			{
				id: 'jit-dominates',
				operator: null,
				weight: weighShare(Math.min(1, share)),
				figures: toFigures({
					jitMs,
					totalMs,
					share: Math.round(share * 1000) / 1000,
					functions: plan.jit?.functions ?? null
				}),
				summary: `Compiling took ${formatMs(jitMs)} of ${formatMs(totalMs)}: ${Math.round(share * 100)} % of the execution.`
			}
		];
	}
};
