import type { PlanOperator } from '../reading/operator';
import type { Plan } from '../reading/reading';
import { defaultHashMemMultiplier, DEFAULT_WORK_MEM_KB, type MemoryLayout } from './layout';
import { readMemoryKb } from './units';

/** What a plan says of the memory that its operators had. */
export interface MemoryGiven {
	layout: MemoryLayout;
	/** work_mem, kB; null: the plan does not say. */
	workMemKb: number | null;
	hashMemMultiplier: number;
}

/**
 * Memory settings of a plan. Settings list what differs from the default, so that a plan with any settings tells
 * work_mem; the multiplier of an operator with a known limit is that limit by work_mem.
 */
export function readMemoryGiven(plan: Plan, layout: MemoryLayout, hashed: PlanOperator | null): MemoryGiven {
	const set = plan.settings['work_mem'];
	const limitKb = hashed?.memoryLimitKb ?? null;
	const known = set !== undefined || Object.keys(plan.settings).length > 0 || limitKb !== null;
	const workMemKb = known ? (set === undefined ? DEFAULT_WORK_MEM_KB : readMemoryKb(set)) : null;
	return {
		layout,
		workMemKb,
		hashMemMultiplier: multiplierOf(plan, layout.version, workMemKb, limitKb)
	};
}

function multiplierOf(plan: Plan, version: number, workMemKb: number | null, limitKb: number | null): number {
	const set = Number(plan.settings['hash_mem_multiplier']);
	if (set >= 1) return set;
	if (workMemKb !== null && limitKb !== null && workMemKb > 0) return Math.max(1, limitKb / workMemKb);
	return defaultHashMemMultiplier(version);
}
