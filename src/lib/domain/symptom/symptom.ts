import type { Plan, Spills, Symptom } from '../reading/reading';
import type { MisestimateAt } from './misestimates';
import type { PlanTree } from './plan-tree';

export const SYMPTOM_IDS = [
	'row-underestimate',
	'row-overestimate',
	'hash-spill',
	'sort-spill',
	'aggregate-spill',
	'materialize-spill',
	'temp-table-on-disk',
	'skewed-hash',
	'build-side-larger',
	'grant-too-small',
	'grant-unused',
	'grant-wait',
	'bitmap-lossy',
	'repeated-inner-scan',
	'lookup-past-tipping-point',
	'filter-discards-most',
	'function-on-column',
	'full-join',
	'missing-parallel-workers',
	'heap-fetches-high',
	'cold-reads',
	'jit-dominates',
	'deep-offset',
	'generic-plan',
	'stale-statistics-reported',
	'no-statistics',
	'missing-index-reported',
	'no-runtime-figures',
	'told-in-words'
] as const;
export type SymptomId = (typeof SYMPTOM_IDS)[number];

export const CAUSE_IDS = [
	'stale-statistics',
	'correlated-predicates',
	'undersized-memory',
	'skewed-join-key',
	'misjudged-distinct-count',
	'missing-index',
	'condition-not-indexable',
	'nested-loop-by-misestimate',
	'wrong-build-side',
	'generic-plan',
	'stale-visibility-map',
	'table-bloat',
	'too-few-workers',
	'jit-overhead',
	'deep-offset',
	'cold-cache',
	'temp-table-limits',
	'join-without-index'
] as const;
export type CauseId = (typeof CAUSE_IDS)[number];

/** What a rule may look at. */
export interface RuleInput {
	plan: Plan;
	/** The plan's operators with their place in it. */
	tree: PlanTree;
	/** Where estimates go wrong, worked out once for all rules. */
	misestimates: readonly MisestimateAt[];
	spills: Spills | null;
}

/** One rule of the catalogue: pure, looks at one plan, says what it found. */
export interface SymptomRule {
	/** The symptoms that this rule may report. */
	ids: readonly SymptomId[];
	find(input: RuleInput): Symptom[];
}
