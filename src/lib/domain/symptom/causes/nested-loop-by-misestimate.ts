import { listRepeated } from '../rules/repeated-inner-scan';
import { found, type CauseFinding, type CauseInput, type CauseRule } from './cause-rule';
import { columnStatistics, statisticsAge, tableOf } from './confirm';
import { columnsOf, readPredicates } from './predicates';

/** The loop was chosen for a handful of rows that were a guess. */
const GUESSED = 0.88;
/** The error has a plain cause of its own (old statistics, columns that depend on each other), and the loop follows from it. */
const FOLLOWS = 0.72;
/** From estimates alone: one row expected, an inner side without an index. */
const GUESSED_FROM_ESTIMATES = 0.62;
/** Rows from which on an expectation is no guess at "hardly any". */
const HARDLY_ANY = 1;

/** A nested loop chosen because its outer side was expected to be tiny. */
export const nestedLoopByMisestimate: CauseRule = (input) =>
	input.plan.hasRuntime ? fromFigures(input) : fromEstimates(input);

function fromFigures(input: CauseInput): CauseFinding | null {
	const origin = input.origins.find(({ direction }) => direction === 'under');
	if (origin === undefined || !input.has('repeated-inner-scan')) return null;
	const table = tableOf(origin.operator);
	const predicates = readPredicates(origin.operator);
	const plain = table !== null && predicates.wrapped.length === 0;
	return {
		id: 'nested-loop-by-misestimate',
		confidence: plain ? FOLLOWS : GUESSED,
		because: found(input, ['repeated-inner-scan', 'row-underestimate']),
		against: plain
			? ['The loop is what the error led to; mend the estimate and another join is chosen.']
			: [],
		confirm: table === null ? [] : [columnStatistics(table, columnsOf(predicates)), statisticsAge(table)]
	};
}

function fromEstimates(input: CauseInput): CauseFinding | null {
	const loop = listRepeated(input.tree).find(
		({ outer }) => outer !== null && (outer.facts.plannedRowsPerLoop ?? Infinity) <= HARDLY_ANY
	);
	if (loop === undefined || loop.outer === null) return null;
	const table = tableOf(loop.outer);
	if (table === null || columnsOf(readPredicates(loop.outer)).length < 2) return null;
	return {
		id: 'nested-loop-by-misestimate',
		confidence: GUESSED_FROM_ESTIMATES,
		because: ['no-runtime-figures'],
		against: ['The plan holds estimates only: count the rows of the outer side before believing it.'],
		confirm: [columnStatistics(table, columnsOf(readPredicates(loop.outer))), statisticsAge(table)]
	};
}
