import type { Symptom } from '../../reading/reading';
import type { RuleInput, SymptomRule } from '../symptom';

/** How to get a plan with figures, by engine. */
const HOW: Record<RuleInput['plan']['engine'], string> = {
	postgresql: 'EXPLAIN (ANALYZE, BUFFERS, SETTINGS)',
	mariadb: 'ANALYZE FORMAT=JSON',
	mysql: 'EXPLAIN ANALYZE',
	showplan: 'the actual plan',
	unknown: 'the plan with run-time figures'
};
/** Light, since it is no fault; it only says that nothing else can be told. */
const WEIGHT = 0.15;

/** Plans with estimates only. */
export const noRuntimeFigures: SymptomRule = {
	ids: ['no-runtime-figures'],
	find({ plan }: RuleInput): Symptom[] {
		if (plan.hasRuntime) return [];
		return [
			{
				id: 'no-runtime-figures',
				operator: null,
				weight: WEIGHT,
				figures: {},
				summary: `The plan holds estimates only: ask for ${HOW[plan.engine]}, which runs the statement (for one that changes data, in a transaction that is rolled back).`
			}
		];
	}
};
