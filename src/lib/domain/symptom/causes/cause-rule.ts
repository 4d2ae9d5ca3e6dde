import type { PlanOperator } from '../../reading/operator';
import type { Plan, Symptom } from '../../reading/reading';
import type { MisestimateAt } from '../misestimates';
import type { Overflow } from '../overflow';
import type { PlanTree } from '../plan-tree';
import type { CauseId, SymptomId } from '../symptom';

/** An operator that overflowed, and whether an underestimate below it explains why. */
export interface OverflowAt extends Overflow {
	operator: PlanOperator;
	explained: boolean;
}

/** What a cause rule may look at. */
export interface CauseInput {
	plan: Plan;
	tree: PlanTree;
	symptoms: readonly Symptom[];
	/** Misestimates where they begin, not where they grow. */
	origins: readonly MisestimateAt[];
	overflows: readonly OverflowAt[];
	/** Whether a symptom was found. */
	has(id: SymptomId): boolean;
	/** The operators at which a symptom was found. */
	operatorsWith(id: SymptomId): PlanOperator[];
}

/** A likely cause before it is ranked. */
export interface CauseFinding {
	id: CauseId;
	confidence: number;
	because: SymptomId[];
	against: string[];
	/** Statements that only read. */
	confirm: string[];
}

/** One cause's rule: null where nothing speaks for it. */
export type CauseRule = (input: CauseInput) => CauseFinding | null;

/** The symptoms of a list that were found, in its order. */
export function found(input: CauseInput, ids: readonly SymptomId[]): SymptomId[] {
	return ids.filter((id) => input.has(id));
}
