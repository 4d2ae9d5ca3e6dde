import type { MisestimateAt } from '../misestimates';
import { found, type CauseFinding, type CauseInput, type CauseRule } from './cause-rule';
import { columnStatistics, extendedStatistics, tableOf, type TableName } from './confirm';
import { columnsOf, readPredicates } from './predicates';
import { findTablesBelow } from './tables';

/** Two or more columns compared for equality: their selectivities are multiplied as if they were independent. */
const SEVERAL_EQUAL = 0.86;
/** Equality and a range, or one of each. */
const SEVERAL_MIXED = 0.5;
/** Several expressions, multiplied with guesses for each. */
const SEVERAL_WRAPPED = 0.6;
/** Too many groups expected of several columns: the product of their distinct values. */
const SEVERAL_GROUPS = 0.75;
/** From estimates alone: several conditions and one row expected. */
const GUESSED_FROM_ESTIMATES = 0.45;

/** Conditions, or grouping columns, that say nearly the same. */
export const correlatedPredicates: CauseRule = (input) =>
	fromScan(input) ?? fromGroups(input) ?? fromEstimates(input);

function fromScan(input: CauseInput): CauseFinding | null {
	const origin = input.origins.find((each) => each.direction === 'under' && countConditions(each) >= 2);
	const table = origin === undefined ? null : tableOf(origin.operator);
	if (origin === undefined || table === null) return null;
	const predicates = readPredicates(origin.operator);
	const confidence =
		predicates.wrapped.length > 0
			? SEVERAL_WRAPPED
			: predicates.equal.length >= 2
				? SEVERAL_EQUAL
				: SEVERAL_MIXED;
	return {
		id: 'correlated-predicates',
		confidence,
		because: found(input, ['row-underestimate', 'repeated-inner-scan', 'hash-spill', 'sort-spill']),
		against:
			predicates.wrapped.length > 0
				? [
						'Some conditions are on expressions, of which there are no statistics at all; that alone may be the error.'
					]
				: ['Old statistics look the same in a plan: look at their age first.'],
		confirm: confirmColumns(table, columnsOf(predicates))
	};
}

function countConditions({ operator }: MisestimateAt): number {
	return columnsOf(readPredicates(operator)).length;
}

function fromGroups(input: CauseInput): CauseFinding | null {
	const origin = input.origins.find(
		({ direction, operator }) => direction === 'over' && operator.facts.groupKey.length >= 2
	);
	if (origin === undefined) return null;
	const [table] = findTablesBelow(origin.operator);
	return {
		id: 'correlated-predicates',
		confidence: SEVERAL_GROUPS,
		because: ['row-overestimate'],
		against: ['A wrong count of distinct values of one of the columns looks the same.'],
		confirm: table === undefined ? [] : confirmColumns(table, [])
	};
}

/** A plan without figures: a scan with several conditions from which one row is expected. */
function fromEstimates(input: CauseInput): CauseFinding | null {
	if (input.plan.hasRuntime) return null;
	const scan = input.tree.operators.find(
		(operator) =>
			tableOf(operator) !== null &&
			(operator.facts.plannedRowsPerLoop ?? 0) <= 1 &&
			columnsOf(readPredicates(operator)).length >= 2 &&
			input.tree.parentOf(operator)?.kind === 'nested-loop'
	);
	const table = scan === undefined ? null : tableOf(scan);
	if (scan === undefined || table === null) return null;
	return {
		id: 'correlated-predicates',
		confidence: GUESSED_FROM_ESTIMATES,
		because: ['no-runtime-figures'],
		against: [
			'The plan holds estimates only: count the rows that meet these conditions before believing it.'
		],
		confirm: confirmColumns(table, columnsOf(readPredicates(scan)))
	};
}

function confirmColumns(table: TableName, columns: string[]): string[] {
	return [columnStatistics(table, columns), extendedStatistics(table)];
}
