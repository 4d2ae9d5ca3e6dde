import type { Cause, OperatorSizing, Plan, Spills, Symptom, Trail } from '../reading/reading';

/** Symptoms, trails, causes and sizing of one plan. */
export function interpretPlan(
	_plan: Plan,
	_spills: Spills | null
): { symptoms: Symptom[]; trails: Trail[]; causes: Cause[]; sizing: OperatorSizing[] } {
	return { symptoms: [], trails: [], causes: [], sizing: [] };
}
