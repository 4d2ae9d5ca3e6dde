import type { PlanOperator } from '../../reading/operator';
import type { SymptomId } from '../symptom';
import { hasIndexAccess, listRepeated } from '../rules/repeated-inner-scan';
import type { CauseFinding, CauseInput, CauseRule } from './cause-rule';
import { columnStatistics, indexesOf, tableOf } from './confirm';
import { columnsOf, readPredicates } from './predicates';
import { findTablesBelow } from './tables';

/** A table scanned for a handful of rows by plain conditions. */
const DISCARDS = 0.86;
/** The inner side of a join, or a subquery, scanned for every outer row. */
const REPEATED = 0.8;
/** The same where the outer side was underestimated: the loop itself is then the fault. */
const REPEATED_BY_MISESTIMATE = 0.5;
/** The larger side hashed knowingly: there was no index to look the few up with. */
const HASHED_KNOWINGLY = 0.84;
/** From estimates alone. */
const GUESSED_FROM_ESTIMATES = 0.6;
/** A whole table sorted or counted off for one page. */
const SORTED_FOR_A_PAGE = 0.6;
/** The join's own cause, a little below the general one. */
const JOIN_STEP = 0.1;

interface Ground {
	operator: PlanOperator;
	confidence: number;
	because: SymptomId[];
	against: string[];
	/** It is a join that lacks the index. */
	join: boolean;
}

/** No index for what is asked. */
export const missingIndex: CauseRule = (input) => {
	const ground = findGround(input);
	if (ground === null) return null;
	return { id: 'missing-index', ...toFinding(ground) };
};

/** A join between columns that no index serves. */
export const joinWithoutIndex: CauseRule = (input) => {
	const ground = findGround(input);
	if (ground === null || !ground.join) return null;
	const finding = toFinding(ground);
	return {
		id: 'join-without-index',
		...finding,
		confidence: Math.round((finding.confidence - JOIN_STEP) * 100) / 100
	};
};

function toFinding({ operator, confidence, because, against }: Ground): Omit<CauseFinding, 'id'> {
	const table = tableOf(operator) ?? findTablesBelow(operator)[0];
	return {
		confidence,
		because,
		against,
		confirm:
			table === undefined
				? []
				: [indexesOf(table), columnStatistics(table, columnsOf(readPredicates(operator)))]
	};
}

function findGround(input: CauseInput): Ground | null {
	return ofDiscards(input) ?? ofRepeats(input) ?? ofBuildSide(input) ?? ofEstimates(input) ?? ofPages(input);
}

function ofDiscards(input: CauseInput): Ground | null {
	const wrapped = new Set(input.operatorsWith('function-on-column'));
	const scan = input
		.operatorsWith('filter-discards-most')
		.find((each) => !wrapped.has(each) && tableOf(each) !== null);
	if (scan === undefined) return null;
	const repeated = input.has('repeated-inner-scan');
	return {
		operator: scan,
		confidence: DISCARDS,
		because: repeated ? ['filter-discards-most', 'repeated-inner-scan'] : ['filter-discards-most'],
		against:
			scan.kind === 'seq-scan'
				? []
				: [
						'An index was used, though not one that finds these rows: the planner may have preferred the order that it gives.'
					],
		join: repeated
	};
}

function ofRepeats(input: CauseInput): Ground | null {
	const inner = input.operatorsWith('repeated-inner-scan').find((each) => !hasIndexAccess(each));
	if (inner === undefined) return null;
	const misled = input.origins.some(({ direction }) => direction === 'under');
	return {
		operator: inner,
		// A spill that was foreseen is the nearer fault: it is mended by a setting.
		confidence: misled ? REPEATED_BY_MISESTIMATE : input.overflows.length > 0 ? REPEATED - 0.1 : REPEATED,
		because: ['repeated-inner-scan'],
		against: misled
			? ['With the rows expected, scanning the inner side once or twice would have been right.']
			: [],
		join: true
	};
}

function ofBuildSide(input: CauseInput): Ground | null {
	const misled = input.origins.some(({ direction }) => direction === 'under');
	const hash = input.operatorsWith('build-side-larger')[0];
	if (hash === undefined || misled) return null;
	return {
		operator: hash,
		confidence: HASHED_KNOWINGLY,
		because: ['build-side-larger'],
		against: [],
		join: true
	};
}

function ofEstimates(input: CauseInput): Ground | null {
	if (input.plan.hasRuntime) return null;
	const repeated = listRepeated(input.tree).find(
		({ inner, outer }) => !hasIndexAccess(inner) && findTablesBelow(inner).length > 0 && expectsMany(outer)
	);
	if (repeated === undefined) return null;
	return {
		operator: repeated.inner,
		confidence: GUESSED_FROM_ESTIMATES,
		because: ['no-runtime-figures'],
		against: ['The plan holds estimates only: it has not been measured how often the inner side ran.'],
		join: true
	};
}

/** Whether the side that drives a repetition is expected to have more than a handful of rows; a subquery's driver is not printed. */
function expectsMany(outer: PlanOperator | null): boolean {
	return outer === null || (outer.facts.plannedRowsPerLoop ?? 0) >= 10;
}

function ofPages(input: CauseInput): Ground | null {
	const limit = input.operatorsWith('deep-offset')[0];
	const sort = limit?.children.find((child) => child.kind === 'sort' || child.kind === 'incremental-sort');
	if (sort === undefined) return null;
	return {
		operator: sort,
		confidence: SORTED_FOR_A_PAGE,
		because: ['deep-offset'],
		against: ['An index in this order helps the first pages; far behind, skipping stays dear.'],
		join: false
	};
}
