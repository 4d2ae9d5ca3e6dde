import type { PlanOperator } from '../reading/operator';
import type { PlanTree } from './plan-tree';
import type { Threshold } from './threshold';

export const LEAST_ERROR: Threshold = {
	name: 'least error',
	value: 10,
	unit: 'times',
	why: 'Leis et al., PVLDB 9(3) 2015, count an estimate as wrong from a factor of 10 on; below, plans seldom change for it.'
};
export const LEAST_ROWS: Threshold = {
	name: 'rows on the larger side, all loops',
	value: 1000,
	unit: 'rows',
	why: 'Being wrong about a few hundred rows costs less than finding out.'
};
export const LEAST_GROWTH: Threshold = {
	name: 'growth above the operator below',
	value: 10,
	unit: 'times',
	why: 'An error is reported where it begins; further up only where it grows by another factor of ten.'
};

export interface Misestimate {
	direction: 'under' | 'over';
	/** max(expected, actual) / min of both, each at least 1, per loop as printed (q-error, Moerkotte et al. 2009). */
	q: number;
}

/** How far an operator's rows are off; null where they are not, or where it may have been stopped early or counted twice. */
export function findMisestimate(operator: PlanOperator, tree: PlanTree): Misestimate | null {
	const { plannedRowsPerLoop: planned, actualRowsPerLoop: actual } = operator.facts;
	const { loops } = operator;
	if (planned === null || actual === null || loops === null || loops === 0 || !isCounted(operator))
		return null;
	const ratio = Math.max(actual, 1) / Math.max(planned, 1);
	const direction = ratio > 1 ? 'under' : 'over';
	const q = Math.max(ratio, 1 / ratio);
	const largerRows = Math.max(planned, actual) * loops;
	if (q < LEAST_ERROR.value || largerRows < LEAST_ROWS.value) return null;
	if (direction === 'over' && tree.mayStopEarly(operator)) return null;
	if (direction === 'under' && isReadAgain(operator, tree)) return null;
	return { direction, q };
}

/** A Hash gives back no rows of its own, bitmaps are not counted, a modification returns what RETURNING asks for. */
function isCounted({ kind, name }: PlanOperator): boolean {
	if (kind === 'hash-build' || kind === 'modify') return false;
	return name !== 'BitmapAnd' && name !== 'BitmapOr';
}

/** A merge join steps back over equal keys: rows read again from what it reads them from are counted again. */
function isReadAgain(operator: PlanOperator, tree: PlanTree): boolean {
	const stores: readonly PlanOperator['kind'][] = ['materialize', 'sort', 'incremental-sort'];
	return tree.parentOf(operator)?.kind === 'merge-join' && stores.includes(operator.kind);
}

/** Operators below whose error this one inherits; what is never counted is looked through. */
function inheritsFrom(operator: PlanOperator, tree: PlanTree): PlanOperator[] {
	return operator.children.flatMap((child) =>
		isCounted(child) && !isReadAgain(child, tree) ? [child] : inheritsFrom(child, tree)
	);
}

/** An operator whose rows are off, and whether the error begins there or grows on one from below. */
export interface MisestimateAt extends Misestimate {
	operator: PlanOperator;
	grows: boolean;
}

/** Where a plan's misestimates begin or grow by another factor of ten, in the order of the plan. */
export function listMisestimates(tree: PlanTree): MisestimateAt[] {
	const errors = new Map<PlanOperator, Misestimate>();
	for (const operator of tree.operators) {
		const found = findMisestimate(operator, tree);
		if (found !== null) errors.set(operator, found);
	}
	return [...errors].flatMap(([operator, found]) => {
		let inherited = 0;
		for (const child of inheritsFrom(operator, tree)) {
			const below = errors.get(child);
			if (below?.direction === found.direction) inherited = Math.max(inherited, below.q);
		}
		if (inherited > 0 && found.q < inherited * LEAST_GROWTH.value) return [];
		return [{ ...found, operator, grows: inherited > 0 }];
	});
}
