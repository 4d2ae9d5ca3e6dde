import { formatRows } from '../../sizing/units';
import type { MisestimateAt } from '../misestimates';
import { found, type CauseInput, type CauseRule } from './cause-rule';
import { columnStatistics, statisticsAge, tableOf } from './confirm';
import { columnsOf, readPredicates, type Predicates } from './predicates';

/** One plain predicate that is far off: the planner has statistics of exactly this and they must be wrong. */
const PLAIN = 0.85;
/** Several plain predicates: as likely that they depend on each other. */
const SEVERAL = 0.6;
/** Too many expected: the table has shrunk, or was estimated from its size in blocks. */
const TOO_MANY = 0.6;
/** A skewed hash table whose share of common values the planner did not know. */
const BEHIND_SKEW = 0.4;

/** Statistics gathered before the data changed. */
export const staleStatistics: CauseRule = (input) => {
	const origin = input.origins.find((each) => isPlainScan(each)) ?? null;
	if (origin === null) return behindSkew(input);
	const table = tableOf(origin.operator);
	const predicates = readPredicates(origin.operator);
	return {
		id: 'stale-statistics',
		confidence: confidenceOf(origin, predicates, input),
		because: found(input, [
			'row-underestimate',
			'row-overestimate',
			'hash-spill',
			'sort-spill',
			'aggregate-spill'
		]),
		against: speakAgainst(predicates),
		confirm: table === null ? [] : [statisticsAge(table), columnStatistics(table, columnsOf(predicates))]
	};
};

/** A scan of a table whose predicates the planner can look up: no expressions. */
function isPlainScan({ operator }: MisestimateAt): boolean {
	return tableOf(operator) !== null && readPredicates(operator).wrapped.length === 0;
}

function confidenceOf(origin: MisestimateAt, predicates: Predicates, input: CauseInput): number {
	if (origin.direction === 'over') return TOO_MANY;
	if (predicates.equal.length >= 2) return SEVERAL;
	// Where the table that was hashed turned out much the larger one, that is what there is to mend at once.
	return input.has('build-side-larger') ? PLAIN - 0.08 : PLAIN;
}

function speakAgainst({ equal, other }: Predicates): string[] {
	const count = equal.length + other.length;
	if (count < 2) return [];
	return [
		`The scan has ${formatRows(count)} conditions: the plan cannot tell old statistics from columns that depend on each other. If the table was analysed since it last changed much, it is the columns.`
	];
}

function behindSkew(input: CauseInput): ReturnType<CauseRule> {
	const [hash] = input.operatorsWith('skewed-hash');
	const scan = hash?.children.find((child) => tableOf(child) !== null);
	const table = scan === undefined ? null : tableOf(scan);
	if (table === null) return null;
	return {
		id: 'stale-statistics',
		confidence: BEHIND_SKEW,
		because: ['skewed-hash'],
		against: [
			'The number of rows is estimated well enough; only the share of the commonest values could be old.'
		],
		confirm: [statisticsAge(table)]
	};
}
