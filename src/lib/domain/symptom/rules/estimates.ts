import { phraseOperator } from '../../reading/operator-phrase';
import type { Symptom } from '../../reading/reading';
import { formatRows, formatTimes } from '../../sizing/units';
import { countPredicates } from '../expressions';
import { countOf, toFigures } from '../figures';
import type { MisestimateAt } from '../misestimates';
import type { RuleInput, SymptomRule } from '../symptom';
import { weighFactor } from '../weight';

/** Row estimates that are off by a factor of ten, at the operators where the error begins or grows. */
export const estimates: SymptomRule = {
	ids: ['row-underestimate', 'row-overestimate'],
	find({ plan, misestimates }: RuleInput): Symptom[] {
		return plan.hasRuntime ? misestimates.map(toSymptom) : [];
	}
};

function toSymptom({ operator, direction, q, grows }: MisestimateAt): Symptom {
	const planned = operator.facts.plannedRowsPerLoop ?? 0;
	const actual = operator.facts.actualRowsPerLoop ?? 0;
	const loops = operator.loops ?? 1;
	const perLoop = loops > 1 ? ` in each of ${formatRows(loops)} loops` : '';
	const where = `${grows ? 'grows worse' : 'goes wrong'} at ${phraseOperator(operator)}`;
	const compared = direction === 'under' ? 'as many' : 'fewer';
	return {
		id: direction === 'under' ? 'row-underestimate' : 'row-overestimate',
		operator: operator.path,
		weight: weighFactor(q, Math.max(planned, actual) * loops),
		figures: toFigures({
			estimated: planned,
			actual,
			q: Math.round(q * 100) / 100,
			loops: loops > 1 ? loops : null,
			operator: operator.name,
			relation: operator.relation,
			predicates: countPredicates(operator.facts.filter) + countPredicates(operator.facts.indexCondition)
		}),
		summary: `The estimate ${where}: ${countOf(planned, 'row')} expected, ${formatRows(actual)} came${perLoop}: ${formatTimes(q)} ${compared}.`
	};
}
