import type { PlanOperator } from '../reading/operator';
import type { OperatorSizing, Plan } from '../reading/reading';
import { postgresLayout, type MemoryLayout } from '../sizing/layout';
import { readMemoryGiven } from '../sizing/operator-memory';
import { sizeAggregate } from '../sizing/size-aggregate';
import { sizeHashJoin } from '../sizing/size-hash-join';
import { sizeSort } from '../sizing/size-sort';
import { guessMajorVersion } from './guess-version';
import type { PlanTree } from './plan-tree';
import { hasAggregateSpilled } from './rules/aggregate-spill';
import { hasSpilled } from './rules/hash-spill';

/** What hands a LIMIT's bound on to a sort below (ExecSetTupleBound). */
const HANDS_BOUND_ON: readonly PlanOperator['kind'][] = ['gather', 'append', 'subquery', 'limit'];

/**
 * The memory that would have kept each spilling hash table, sort and aggregate of a plan in memory, largest setting first.
 * Empty where nothing spilled, without run-time figures, and for engines whose rule is not public.
 */
export function sizeOperators(plan: Plan, tree: PlanTree, pointerBytes: 4 | 8 = 8): OperatorSizing[] {
	if (plan.engine !== 'postgresql' || !plan.hasRuntime) return [];
	const layout = postgresLayout(guessMajorVersion(plan), pointerBytes);
	return tree.operators
		.flatMap((operator) => sizeOne(operator, plan, tree, layout) ?? [])
		.sort((one, other) => other.setting.valueKb - one.setting.valueKb);
}

function sizeOne(
	operator: PlanOperator,
	plan: Plan,
	tree: PlanTree,
	layout: MemoryLayout
): OperatorSizing | null {
	if (operator.kind === 'hash-build' && hasSpilled(operator)) {
		const place = { workersPlanned: findWorkersPlanned(operator, tree) };
		return sizeHashJoin(operator, place, readMemoryGiven(plan, layout, operator));
	}
	if (operator.kind === 'sort' || operator.kind === 'incremental-sort') {
		const [input] = operator.children;
		if (input === undefined || input.actualRows === null) return null;
		const place = { inputRows: input.actualRows, underLimit: isUnderLimit(operator, tree) };
		return sizeSort(operator, place, readMemoryGiven(plan, layout, null));
	}
	if (operator.kind === 'hash-aggregate' && hasAggregateSpilled(operator)) {
		return sizeAggregate(operator, readMemoryGiven(plan, layout, operator));
	}
	return null;
}

function findWorkersPlanned(operator: PlanOperator, tree: PlanTree): number {
	for (let next = tree.parentOf(operator); next !== null; next = tree.parentOf(next)) {
		if (next.kind === 'gather') return next.facts.workersPlanned ?? 0;
	}
	return 0;
}

function isUnderLimit(sort: PlanOperator, tree: PlanTree): boolean {
	for (let next = tree.parentOf(sort); next !== null; next = tree.parentOf(next)) {
		if (next.kind === 'limit') return true;
		if (!HANDS_BOUND_ON.includes(next.kind) || (next.kind === 'subquery' && next.facts.filter !== null))
			return false;
	}
	return false;
}
