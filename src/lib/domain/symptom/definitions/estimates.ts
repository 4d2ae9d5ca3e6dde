import { LEAST_ERROR, LEAST_GROWTH, LEAST_ROWS } from '../misestimates';
import type { SymptomId } from '../symptom';
import type { SymptomDefinition } from './definition';

/** Symptoms of estimates that were wrong or missing. */
export const ESTIMATE_SYMPTOMS = {
	'row-underestimate': {
		id: 'row-underestimate',
		title: 'Far more rows than expected',
		what: 'The planner chose joins, their order and their memory for a handful of rows, and many times as many came. The error begins at one operator and is carried upwards; that operator is the one to look at.',
		recognise:
			'Expected against actual rows of one operator, both for one loop as PostgreSQL prints them. Hash, BitmapAnd and BitmapOr have no rows of their own.',
		thresholds: [LEAST_ERROR, LEAST_ROWS, LEAST_GROWTH],
		usualCauses: [
			'stale-statistics',
			'correlated-predicates',
			'misjudged-distinct-count',
			'generic-plan',
			'condition-not-indexable'
		]
	},
	'row-overestimate': {
		id: 'row-overestimate',
		title: 'Far fewer rows than expected',
		what: 'Many times more rows were expected than came: memory, workers or compiling were spent on rows that never existed. Rows that nobody asked for (below a LIMIT, at EXISTS, at the end of a merge join) are no error.',
		recognise: 'Expected against actual rows of one operator that was read to its end.',
		thresholds: [LEAST_ERROR, LEAST_ROWS, LEAST_GROWTH],
		usualCauses: [
			'condition-not-indexable',
			'correlated-predicates',
			'table-bloat',
			'stale-statistics',
			'generic-plan'
		]
	},
	'generic-plan': {
		id: 'generic-plan',
		title: 'One plan for all values',
		what: 'After some executions a prepared statement may keep one plan that was made without the values of its parameters. It fits the average value; for a very common or a very rare one it can be badly wrong.',
		recognise:
			'PostgreSQL: $1, $2 … in a condition where the value should be, and rows far off at that very operator. $0 that an InitPlan returns is something else.',
		thresholds: [LEAST_ERROR, LEAST_ROWS],
		usualCauses: ['generic-plan', 'nested-loop-by-misestimate']
	},
	'stale-statistics-reported': {
		id: 'stale-statistics-reported',
		title: 'The plan names old statistics',
		what: 'The plan says itself which statistics it used, how many rows have changed since, and how large the sample was.',
		recognise: 'Showplan XML: the modification counter of the statistics used.',
		thresholds: [],
		usualCauses: ['stale-statistics']
	},
	'no-statistics': {
		id: 'no-statistics',
		title: 'Columns without statistics',
		what: 'The plan says itself that a column had no statistics, so that everything about it is a guess.',
		recognise: 'Showplan XML: the warning about columns without statistics.',
		thresholds: [],
		usualCauses: ['stale-statistics']
	},
	'no-runtime-figures': {
		id: 'no-runtime-figures',
		title: 'Estimates only',
		what: 'The plan was made but not measured: it can’t tell what spilled, what was slow or which estimate was wrong. Ask for one with figures; it runs the statement, so one that changes data belongs in a transaction that is rolled back.',
		recognise: 'No actual rows anywhere. PostgreSQL: EXPLAIN (ANALYZE, BUFFERS, SETTINGS).',
		thresholds: [],
		usualCauses: []
	},
	'told-in-words': {
		id: 'told-in-words',
		title: 'Told in words',
		what: 'The narrative names a symptom that no evidence shows yet. Memory at night is often right and sometimes not: a plan or a log settles it.',
		recognise: 'Words such as "spilled", "external merge", "estimated 90 rows, got 500k" in the narrative.',
		thresholds: [],
		usualCauses: []
	}
} satisfies Partial<Record<SymptomId, SymptomDefinition>>;
