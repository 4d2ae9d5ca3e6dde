import type { PlanOperator } from '../../reading/operator';
import { phraseOperator } from '../../reading/operator-phrase';
import type { Symptom } from '../../reading/reading';
import { formatRows } from '../../sizing/units';
import { countOf, toFigures } from '../figures';
import { findMisestimate } from '../misestimates';
import type { PlanTree } from '../plan-tree';
import type { RuleInput, SymptomRule } from '../symptom';
import { weighFactor } from '../weight';

/** Conditions in which a parameter of a prepared statement may stand unresolved. */
function conditionsOf({ facts }: PlanOperator): string[] {
	const all = [
		facts.filter,
		facts.indexCondition,
		facts.recheckCondition,
		facts.joinFilter,
		facts.hashCondition,
		facts.mergeCondition,
		...facts.otherConditions
	];
	return all.filter((condition) => condition !== null);
}

/** Parameters ("$0") that an InitPlan of the plan itself fills in. */
function listReturned(tree: PlanTree): Set<string> {
	const returned = new Set<string>();
	for (const { facts } of tree.operators) {
		const names = /\(returns ([^)]*)\)/.exec(facts.subplanName ?? '')?.[1] ?? '';
		for (const name of names.matchAll(/\$\d+/g)) returned.add(name[0]);
	}
	return returned;
}

/** Parameters of the statement that the plan did not know when it was made. */
function listOpenParameters(operator: PlanOperator, returned: ReadonlySet<string>): string[] {
	const found = new Set<string>();
	for (const condition of conditionsOf(operator)) {
		for (const match of condition.matchAll(/\$\d+/g)) if (!returned.has(match[0])) found.add(match[0]);
	}
	return [...found].sort();
}

/** Operators of a prepared statement whose estimate is off because the plan was made without the parameters' values. */
export const genericPlan: SymptomRule = {
	ids: ['generic-plan'],
	find({ tree }: RuleInput): Symptom[] {
		const returned = listReturned(tree);
		return tree.operators.flatMap((operator) => {
			const error = findMisestimate(operator, tree);
			if (error === null) return [];
			const parameters = listOpenParameters(operator, returned);
			if (parameters.length === 0) return [];
			const planned = operator.facts.plannedRowsPerLoop ?? 0;
			const actual = operator.facts.actualRowsPerLoop ?? 0;
			return [
				{
					id: 'generic-plan' as const,
					operator: operator.path,
					weight: weighFactor(error.q, Math.max(planned, actual) * (operator.loops ?? 1)),
					figures: toFigures({
						parameters: parameters.join(', '),
						estimated: planned,
						actual,
						q: Math.round(error.q * 100) / 100
					}),
					summary: `The ${phraseOperator(operator)} was planned without the value of ${countOf(parameters.length, 'parameter')} (${parameters.join(', ')}): ${countOf(planned, 'row')} expected, ${formatRows(actual)} came.`
				}
			];
		});
	}
};
