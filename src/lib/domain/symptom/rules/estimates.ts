import type { PlanOperator } from '../../reading/operator';
import { phraseOperator } from '../../reading/operator-phrase';
import type { Symptom } from '../../reading/reading';
import { formatRows, formatTimes } from '../../sizing/units';
import { countPredicates } from '../expressions';
import { toFigures } from '../figures';
import type { PlanTree } from '../plan-tree';
import type { RuleInput, SymptomRule } from '../symptom';
import type { Threshold } from '../threshold';
import { weighFactor } from '../weight';

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

/** Row estimates that are off by a factor of ten, at the operators where the error begins or grows. */
export const estimates: SymptomRule = {
	ids: ['row-underestimate', 'row-overestimate'],
	find({ plan, tree }: RuleInput): Symptom[] {
		if (!plan.hasRuntime) return [];
		return tree.operators.flatMap((operator) => {
			const found = findMisestimate(operator, tree);
			if (found === null) return [];
			const below = inheritsFrom(operator, tree)
				.map((child) => findMisestimate(child, tree))
				.filter((each) => each !== null && each.direction === found.direction);
			const inherited = Math.max(0, ...below.map((each) => each?.q ?? 0));
			if (inherited > 0 && found.q < inherited * LEAST_GROWTH.value) return [];
			return [toSymptom(operator, found, inherited > 0)];
		});
	}
};

function toSymptom(operator: PlanOperator, { direction, q }: Misestimate, grows: boolean): Symptom {
	const planned = operator.facts.plannedRowsPerLoop ?? 0;
	const actual = operator.facts.actualRowsPerLoop ?? 0;
	const loops = operator.loops ?? 1;
	const perLoop = loops > 1 ? ` in each of ${formatRows(loops)} loops` : '';
	const verb = grows ? 'grows' : 'begins';
	return {
		id: direction === 'under' ? 'row-underestimate' : 'row-overestimate',
		operator: operator.path,
		weight: weighFactor(q, Math.max(planned, actual) * loops),
		figures: toFigures({
			estimated: planned,
			actual,
			q: Math.round(q * 100) / 100,
			loops: loops > 1 ? loops : null,
			operator: operator.name,
			relation: operator.relation,
			predicates: countPredicates(operator.facts.filter) + countPredicates(operator.facts.indexCondition)
		}),
		summary: `The estimate ${verb} to be wrong at ${phraseOperator(operator)}: ${formatRows(planned)} rows expected, ${formatRows(actual)} came${perLoop}, ${formatTimes(q)} too ${direction === 'under' ? 'few' : 'many'}.`
	};
}
