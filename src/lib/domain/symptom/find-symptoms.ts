import type { Symptom } from '../reading/reading';
import { RULES } from './rule-list';
import type { RuleInput } from './symptom';

/** Everything that the rules find in one plan, heaviest first; equal weights in the order of the plan. */
export function findSymptoms(input: RuleInput): Symptom[] {
	const found = RULES.flatMap((rule) => rule.find(input));
	const order = new Map(input.tree.operators.map((operator, index) => [operator.path, index]));
	const place = (symptom: Symptom) => (symptom.operator === null ? -1 : (order.get(symptom.operator) ?? -1));
	return found.sort((one, other) => other.weight - one.weight || place(one) - place(other));
}
