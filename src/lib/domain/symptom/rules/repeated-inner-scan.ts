import { walkOperators, type PlanOperator } from '../../reading/operator';
import { phraseOperator } from '../../reading/operator-phrase';
import type { Symptom } from '../../reading/reading';
import { formatMs, formatRows, formatTimes } from '../../sizing/units';
import { countOf, toFigures } from '../figures';
import type { PlanTree } from '../plan-tree';
import type { RuleInput, SymptomRule } from '../symptom';
import type { Threshold } from '../threshold';
import { weighRows } from '../weight';
import { isScan } from './filter-discards-most';

export const LEAST_RUNS: Threshold = {
	name: 'runs of an inner side without an index',
	value: 100,
	unit: 'loops',
	why: 'Fewer repetitions of a scan are often the cheapest plan for a small outer side.'
};
export const LEAST_TOUCHED: Threshold = {
	name: 'rows that those runs looked at',
	value: 1_000_000,
	unit: 'rows',
	why: 'A small inner table may be read again and again from memory without harm.'
};
export const LEAST_INDEX_RUNS: Threshold = {
	name: 'runs of an inner index access',
	value: 10_000,
	unit: 'loops',
	why: 'From about here on one scan and a hash join would usually have been cheaper than as many descents.'
};
export const LEAST_OUTER_ERROR: Threshold = {
	name: 'underestimate of the outer side',
	value: 10,
	unit: 'times',
	why: 'Many index lookups are the right plan where they were foreseen.'
};

const INDEXED: readonly PlanOperator['kind'][] = [
	'index-scan',
	'index-only-scan',
	'bitmap-scan',
	'bitmap-index',
	'lookup'
];

/** What runs again for every outer row: the inner side of a nested loop, or a subquery in an expression. */
interface Repeated {
	inner: PlanOperator;
	outer: PlanOperator | null;
}

/** Inner sides that are read again and again: without an index, or with one under an outer side that grew unforeseen. */
export const repeatedInnerScan: SymptomRule = {
	ids: ['repeated-inner-scan'],
	find({ plan, tree }: RuleInput): Symptom[] {
		if (!plan.hasRuntime) return [];
		return listRepeated(tree).flatMap((repeated) => findUnindexed(repeated) ?? findOverrun(repeated) ?? []);
	}
};

/** The repeated inputs of a plan. */
export function listRepeated(tree: PlanTree): Repeated[] {
	return tree.operators.flatMap((operator): Repeated[] => {
		if (operator.facts.role === 'sub-plan') return [{ inner: throughCache(operator), outer: null }];
		const parent = tree.parentOf(operator);
		if (operator.facts.role !== 'inner' || parent?.kind !== 'nested-loop') return [];
		const outer = parent.children.find((child) => child.facts.role === 'outer') ?? null;
		return [{ inner: throughCache(operator), outer }];
	});
}

/** Behind a Memoize only its misses run. */
function throughCache(operator: PlanOperator): PlanOperator {
	return operator.kind === 'memoize' ? (operator.children[0] ?? operator) : operator;
}

/** Whether an operator or anything below it reads through an index. */
export function hasIndexAccess(operator: PlanOperator): boolean {
	for (const each of walkOperators(operator)) if (INDEXED.includes(each.kind)) return true;
	return false;
}

/** Rows that a repeated side looked at in all its runs: kept and thrown away, at the operator that touched most. */
export function rowsTouched(inner: PlanOperator): number {
	let most = 0;
	for (const { facts, loops } of walkOperators(inner)) {
		const perLoop =
			(facts.actualRowsPerLoop ?? 0) + (facts.removedByFilter ?? 0) + (facts.removedByJoinFilter ?? 0);
		most = Math.max(most, perLoop * (loops ?? 0));
	}
	return most;
}

function findUnindexed({ inner }: Repeated): Symptom[] | null {
	const loops = inner.loops ?? 0;
	if (loops < LEAST_RUNS.value || hasIndexAccess(inner)) return null;
	const touched = rowsTouched(inner);
	if (touched < LEAST_TOUCHED.value) return null;
	return [
		toSymptom(
			inner,
			touched,
			null,
			`The ${phraseOperator(findScan(inner))} has no index to use and ran ${formatRows(loops)} times, looking at ${formatRows(touched)} rows in all`
		)
	];
}

/** The table that is read again and again, for naming it. */
function findScan(inner: PlanOperator): PlanOperator {
	for (const each of walkOperators(inner)) if (each.relation !== null && isScan(each)) return each;
	return inner;
}

function findOverrun({ inner, outer }: Repeated): Symptom[] | null {
	const error = outer === null ? null : underestimateOf(outer);
	if (outer === null || error === null || error < LEAST_OUTER_ERROR.value) return null;
	for (const access of walkOperators(inner)) {
		const loops = access.loops ?? 0;
		if (!INDEXED.includes(access.kind) || loops < LEAST_INDEX_RUNS.value) continue;
		const expected = countOf(outer.facts.plannedRowsPerLoop ?? 0, 'outer row was', 'outer rows were');
		return [
			toSymptom(
				access,
				rowsTouched(access),
				error,
				`The ${phraseOperator(access)} ran ${formatRows(loops)} times where ${expected} expected: ${formatTimes(error)} as many`
			)
		];
	}
	return null;
}

function underestimateOf({ facts }: PlanOperator): number | null {
	if (facts.actualRowsPerLoop === null || facts.plannedRowsPerLoop === null) return null;
	return Math.max(facts.actualRowsPerLoop, 1) / Math.max(facts.plannedRowsPerLoop, 1);
}

function toSymptom(inner: PlanOperator, touched: number, outerError: number | null, what: string): Symptom {
	const time = inner.totalMs === null ? '' : `, ${formatMs(inner.totalMs)}`;
	return {
		id: 'repeated-inner-scan',
		operator: inner.path,
		weight: weighRows(Math.max(touched, inner.loops ?? 0) / 10),
		figures: toFigures({
			loops: inner.loops,
			rowsPerLoop: inner.facts.actualRowsPerLoop,
			rowsTouched: touched,
			outerError: outerError === null ? null : Math.round(outerError * 10) / 10,
			totalMs: inner.totalMs,
			relation: inner.relation
		}),
		summary: `${what}${time}.`
	};
}
