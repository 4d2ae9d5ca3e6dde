import type { Cause, OperatorSizing, Plan, Spills, Symptom, Trail } from '../reading/reading';
import { findTrails } from '../reading/drift-trail';
import { findCauses } from './find-causes';
import { sizeOperators } from './size-operators';
import { findSymptoms } from './find-symptoms';
import { listMisestimates } from './misestimates';
import { toPlanTree } from './plan-tree';

/** What one plan shows: its symptoms, heaviest first; the trails of its misestimates; likely causes; what its spills would have needed. */
export interface Interpretation {
	symptoms: Symptom[];
	trails: Trail[];
	causes: Cause[];
	sizing: OperatorSizing[];
}

/** Interprets one plan. Pure: the same plan gives the same answer. */
export function interpretPlan(plan: Plan, spills: Spills | null): Interpretation {
	const tree = toPlanTree(plan.root);
	const misestimates = listMisestimates(tree);
	const symptoms = findSymptoms({ plan, tree, misestimates, spills });
	return {
		symptoms,
		trails: findTrails(tree, misestimates),
		causes: findCauses({ plan, tree, misestimates, symptoms }),
		sizing: sizeOperators(plan, tree)
	};
}
