import { found, type CauseRule } from './cause-rule';
import { columnTypes, indexesOf, tableOf } from './confirm';
import { readPredicates } from './predicates';

/** The rule's own symptom. */
const WRAPPED = 0.88;
/** The same where the guess made a nested loop run away: that comes first. */
const WRAPPED_BELOW_LOOP = 0.5;
/** An expression that misled the estimate without many rows being thrown away. */
const WRAPPED_ORIGIN = 0.55;

/** A condition written so that no index on the column can serve it, and of which there are no statistics. */
export const conditionNotIndexable: CauseRule = (input) => {
	const [scan] = input.operatorsWith('function-on-column');
	const origin = input.origins.find(({ operator }) => readPredicates(operator).wrapped.length > 0)?.operator;
	const operator = scan ?? origin;
	if (operator === undefined) return null;
	const table = tableOf(operator);
	const runsAway = input.has('repeated-inner-scan') && input.has('row-underestimate');
	return {
		id: 'condition-not-indexable',
		confidence: scan === undefined ? WRAPPED_ORIGIN : runsAway ? WRAPPED_BELOW_LOOP : WRAPPED,
		because: found(input, [
			'function-on-column',
			'filter-discards-most',
			'row-overestimate',
			'row-underestimate'
		]),
		against: [
			'An index on the same expression would serve it; the list of indexes tells whether there is one.'
		],
		confirm: table === null ? [] : [indexesOf(table), columnTypes(table)]
	};
};
