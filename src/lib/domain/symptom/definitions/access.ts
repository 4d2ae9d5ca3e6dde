import { LEAST_BROUGHT, MOST_RETURNED_SHARE } from '../rules/deep-offset';
import { LEAST_DISCARDED_SHARE, LEAST_READ, MOST_LOOPS_SUMMED } from '../rules/filter-discards-most';
import { LEAST_PAIRS, LEAST_SIDE } from '../rules/full-join';
import { LEAST_REMOVED, LEAST_REMOVED_SHARE } from '../rules/function-on-column';
import { LEAST_FETCHES, LEAST_FETCH_SHARE } from '../rules/heap-fetches-high';
import { LEAST_INDEX_RUNS, LEAST_OUTER_ERROR, LEAST_RUNS, LEAST_TOUCHED } from '../rules/repeated-inner-scan';
import type { SymptomId } from '../symptom';
import type { SymptomDefinition } from './definition';

/** Symptoms of how rows are found. */
export const ACCESS_SYMPTOMS = {
	'repeated-inner-scan': {
		id: 'repeated-inner-scan',
		title: 'Inner side read again and again',
		what: 'For every row of one input the other is read once more: in full where it has no index, or by an index lookup that was foreseen for a handful of rows and ran tens of thousands of times.',
		recognise: 'High "loops" at the inner side of a nested loop or at a SubPlan.',
		thresholds: [LEAST_RUNS, LEAST_TOUCHED, LEAST_INDEX_RUNS, LEAST_OUTER_ERROR],
		usualCauses: [
			'nested-loop-by-misestimate',
			'missing-index',
			'join-without-index',
			'correlated-predicates',
			'generic-plan'
		]
	},
	'lookup-past-tipping-point': {
		id: 'lookup-past-tipping-point',
		title: 'Too many single lookups',
		what: 'Rows are fetched one by one through an index that does not hold all columns. From about a quarter to a third of the table’s pages on, expressed in rows, one scan of the whole table is cheaper.',
		recognise: 'Rows looked up against the pages of the table; the plan alone seldom names the pages.',
		thresholds: [],
		usualCauses: ['stale-statistics', 'nested-loop-by-misestimate', 'generic-plan']
	},
	'filter-discards-most': {
		id: 'filter-discards-most',
		title: 'Nearly everything read is thrown away',
		what: 'A scan read many rows and its condition kept one in a hundred or fewer. An index that leads to those rows would have read next to nothing.',
		recognise: 'PostgreSQL: "Rows Removed by Filter" at a scan against the rows that it gave back.',
		thresholds: [LEAST_READ, LEAST_DISCARDED_SHARE, MOST_LOOPS_SUMMED],
		usualCauses: ['missing-index', 'condition-not-indexable', 'generic-plan']
	},
	'function-on-column': {
		id: 'function-on-column',
		title: 'Condition wraps the column',
		what: 'The condition compares a function of the column, a cast of it or a sum with it. An index on the bare column can’t serve that, and there are no statistics of the expression, so the estimate is a guess.',
		recognise:
			'lower(…), to_char(…), (column)::numeric, column + … on the column’s side of a comparison in a scan’s filter. (column)::text on a varchar column is harmless.',
		thresholds: [LEAST_REMOVED, LEAST_REMOVED_SHARE],
		usualCauses: ['condition-not-indexable']
	},
	'full-join': {
		id: 'full-join',
		title: 'Join without a key',
		what: 'Every row of one table is compared with every row of another: there is no index for the join, or no condition at all.',
		recognise:
			'MariaDB: "Full_join: Yes" in the slow log, a block nested loop in the plan. PostgreSQL: a nested loop that gives back the whole product of its inputs.',
		thresholds: [LEAST_PAIRS, LEAST_SIDE],
		usualCauses: ['join-without-index', 'missing-index']
	},
	'heap-fetches-high': {
		id: 'heap-fetches-high',
		title: 'Index-only scan that visits the table',
		what: 'An index-only scan may skip the table where the visibility map says that a page is visible to everybody. After many changes without a vacuum it says so of hardly any page.',
		recognise: 'PostgreSQL: "Heap Fetches" at an Index Only Scan.',
		thresholds: [LEAST_FETCHES, LEAST_FETCH_SHARE],
		usualCauses: ['stale-visibility-map']
	},
	'deep-offset': {
		id: 'deep-offset',
		title: 'Deep offset',
		what: 'To skip a hundred thousand rows the server has to make them first. Each page costs more than the one before, and a sort under it holds offset plus limit.',
		recognise: 'A Limit that gives back a hundredth or less of what its input brought.',
		thresholds: [LEAST_BROUGHT, MOST_RETURNED_SHARE],
		usualCauses: ['deep-offset', 'missing-index']
	},
	'missing-index-reported': {
		id: 'missing-index-reported',
		title: 'The plan suggests an index',
		what: 'The engine names an index that it would have liked. It knows this statement only: not what the index costs on every write, nor whether another one nearly serves. A hint to weigh, no command.',
		recognise: 'Showplan XML: the missing-index element with table, columns and impact.',
		thresholds: [],
		usualCauses: ['missing-index']
	}
} satisfies Partial<Record<SymptomId, SymptomDefinition>>;
