import { found, type CauseRule } from './cause-rule';
import { columnStatistics } from './confirm';
import { findTablesBelow } from './tables';

/** More groups than expected come from one thing only: too few distinct values believed. */
const TOO_FEW_GROUPS = 0.85;
/** Too many groups expected: of several columns it is rather that they depend on each other. */
const TOO_MANY_GROUPS = 0.6;

/** A number of distinct values that the sample got wrong. */
export const misjudgedDistinctCount: CauseRule = (input) => {
	const origin = input.origins.find(
		({ operator }) =>
			operator.kind === 'hash-aggregate' || operator.kind === 'group-aggregate' || operator.kind === 'unique'
	);
	if (origin === undefined) return null;
	const { direction, operator } = origin;
	const [table] = findTablesBelow(operator);
	const columns = operator.facts.groupKey.flatMap(
		(key) => /^(?:[\w$]+\.)?("?[\w$]+"?)$/.exec(key)?.[1] ?? []
	);
	const expressions = operator.facts.groupKey.length - columns.length;
	return {
		id: 'misjudged-distinct-count',
		confidence: direction === 'under' ? TOO_FEW_GROUPS : TOO_MANY_GROUPS,
		because: found(input, [
			'aggregate-spill',
			direction === 'under' ? 'row-underestimate' : 'row-overestimate',
			'hash-spill'
		]),
		against:
			expressions > 0
				? [
						'The grouping is by an expression: the planner has no statistics of it and guesses, however fresh they are.'
					]
				: ['If the table has grown much since its last analysis, the count is only old.'],
		confirm: table === undefined ? [] : [columnStatistics(table, columns)]
	};
};
