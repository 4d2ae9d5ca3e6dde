import type { PlanOperator } from '../reading/operator';
import type { Cause, Plan, Symptom } from '../reading/reading';
import type { CauseInput, CauseRule, OverflowAt } from './causes/cause-rule';
import { conditionNotIndexable } from './causes/condition-not-indexable';
import { correlatedPredicates } from './causes/correlated-predicates';
import { misjudgedDistinctCount } from './causes/misjudged-distinct-count';
import { joinWithoutIndex, missingIndex } from './causes/missing-index';
import { nestedLoopByMisestimate } from './causes/nested-loop-by-misestimate';
import { deepOffsetCause, genericPlanCause, jitOverhead, tooFewWorkers } from './causes/plan-choice';
import { skewedJoinKey } from './causes/skewed-join-key';
import { staleStatistics } from './causes/stale-statistics';
import { coldCache, staleVisibilityMap, tableBloat } from './causes/storage';
import { undersizedMemory } from './causes/undersized-memory';
import { wrongBuildSide } from './causes/wrong-build-side';
import type { MisestimateAt } from './misestimates';
import { findOverflow } from './overflow';
import type { PlanTree } from './plan-tree';
import type { SymptomId } from './symptom';

/** The only list of cause rules; of equal confidence the earlier one is named first. */
const CAUSE_RULES: readonly CauseRule[] = [
	genericPlanCause,
	deepOffsetCause,
	skewedJoinKey,
	staleVisibilityMap,
	tooFewWorkers,
	jitOverhead,
	tableBloat,
	nestedLoopByMisestimate,
	conditionNotIndexable,
	wrongBuildSide,
	correlatedPredicates,
	missingIndex,
	joinWithoutIndex,
	misjudgedDistinctCount,
	staleStatistics,
	undersizedMemory,
	coldCache
];

/** What causes are judged by. */
interface CauseEvidence {
	plan: Plan;
	tree: PlanTree;
	misestimates: readonly MisestimateAt[];
	symptoms: readonly Symptom[];
}

/** What may be behind a plan's symptoms, likeliest first. Runbooks are filled in by the server. */
export function findCauses(evidence: CauseEvidence): Cause[] {
	const input = toInput(evidence);
	return CAUSE_RULES.flatMap((rule) => rule(input) ?? [])
		.sort((one, other) => other.confidence - one.confidence)
		.map(({ confirm, ...finding }) => ({
			...finding,
			confirm: confirm.map((sql) => ({ sql, readsOnly: true as const })),
			runbooks: []
		}));
}

function toInput({ plan, tree, misestimates, symptoms }: CauseEvidence): CauseInput {
	const origins = plan.hasRuntime ? misestimates.filter((each) => !each.grows) : [];
	const byPath = new Map(tree.operators.map((operator) => [operator.path, operator]));
	const underestimated = origins
		.filter(({ direction }) => direction === 'under')
		.map(({ operator }) => operator);
	const operatorsWith = (id: SymptomId) =>
		symptoms.flatMap((symptom) => {
			const operator =
				symptom.id === id && symptom.operator !== null ? byPath.get(symptom.operator) : undefined;
			return operator === undefined ? [] : [operator];
		});
	const ids = new Set(symptoms.map((symptom) => symptom.id));
	return {
		plan,
		tree,
		symptoms,
		origins,
		overflows: listOverflows(tree, underestimated),
		has: (id) => ids.has(id),
		operatorsWith
	};
}

function listOverflows(tree: PlanTree, underestimated: readonly PlanOperator[]): OverflowAt[] {
	const above = new Set<PlanOperator>();
	for (const origin of underestimated) {
		for (
			let next: PlanOperator | null = origin;
			next !== null && !above.has(next);
			next = tree.parentOf(next)
		)
			above.add(next);
	}
	return tree.operators.flatMap((operator) => {
		const overflow = findOverflow(operator, tree);
		return overflow === null ? [] : [{ ...overflow, operator, explained: above.has(operator) }];
	});
}
