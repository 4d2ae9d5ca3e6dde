import type { Symptom } from '../../reading/reading';
import { countOf, toFigures } from '../figures';
import type { RuleInput, SymptomRule } from '../symptom';
import type { Threshold } from '../threshold';
import { weighShare } from '../weight';

export const MOST_WORKERS_MISSING: Threshold = {
	name: 'workers missing',
	value: 0,
	unit: 'workers',
	why: 'The plan was chosen for all of them; each one missing leaves its share to the others.'
};

/** Parallel plans that did not get the workers they were made for. */
export const missingParallelWorkers: SymptomRule = {
	ids: ['missing-parallel-workers'],
	find({ tree }: RuleInput): Symptom[] {
		return tree.operators.flatMap((operator) => {
			const { workersPlanned: planned, workersLaunched: launched } = operator.facts;
			if (planned === null || launched === null || operator.facts.neverExecuted) return [];
			const missing = planned - launched;
			if (missing <= MOST_WORKERS_MISSING.value) return [];
			return [
				{
					id: 'missing-parallel-workers' as const,
					operator: operator.path,
					weight: weighShare((missing / planned) * 0.7),
					figures: toFigures({ planned, launched }),
					summary: `${countOf(planned, 'parallel worker was', 'parallel workers were')} planned, ${launched === 0 ? 'none' : String(launched)} started.`
				}
			];
		});
	}
};
