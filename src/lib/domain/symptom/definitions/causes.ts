import type { CauseId } from '../symptom';
import type { CauseDefinition } from './definition';

/** What may stand behind symptoms, by id. */
export const CAUSE_CATALOGUE: Readonly<Record<CauseId, CauseDefinition>> = {
	'stale-statistics': {
		id: 'stale-statistics',
		title: 'Stale statistics',
		what: 'The data changed much since the statistics were gathered: a bulk load, a new day beyond the last known value, a purge.'
	},
	'correlated-predicates': {
		id: 'correlated-predicates',
		title: 'Correlated conditions',
		what: 'Several conditions say nearly the same, and the planner multiplies them as if they were independent.'
	},
	'undersized-memory': {
		id: 'undersized-memory',
		title: 'Undersized memory',
		what: 'The rows were foreseen and do not fit the allowance for sorting, hashing or storing.'
	},
	'skewed-join-key': {
		id: 'skewed-join-key',
		title: 'Skewed join key',
		what: 'A few values of the key, or NULL, hold most rows: no splitting parts them.'
	},
	'misjudged-distinct-count': {
		id: 'misjudged-distinct-count',
		title: 'Misjudged number of groups',
		what: 'The sample saw the common values and missed the many rare ones, so far too few groups were expected.'
	},
	'missing-index': {
		id: 'missing-index',
		title: 'Missing index',
		what: 'What is asked for can only be found by reading everything.'
	},
	'condition-not-indexable': {
		id: 'condition-not-indexable',
		title: 'Condition that no index serves',
		what: 'The column is wrapped in a function, a cast or a sum, so that an index on it does not help and the estimate is a guess.'
	},
	'nested-loop-by-misestimate': {
		id: 'nested-loop-by-misestimate',
		title: 'Nested loop by misestimate',
		what: 'A loop was chosen for one expected row and ran for thousands.'
	},
	'wrong-build-side': {
		id: 'wrong-build-side',
		title: 'Wrong side hashed',
		what: 'The side that was hashed was believed to be the smaller one and was not.'
	},
	'generic-plan': {
		id: 'generic-plan',
		title: 'Generic plan',
		what: 'A prepared statement runs with a plan made without the values of its parameters.'
	},
	'stale-visibility-map': {
		id: 'stale-visibility-map',
		title: 'Visibility map behind',
		what: 'No vacuum since many rows changed: index-only scans have to look at the table.'
	},
	'table-bloat': {
		id: 'table-bloat',
		title: 'Bloated table',
		what: 'Pages full of dead rows or free space are read for few live rows.'
	},
	'too-few-workers': {
		id: 'too-few-workers',
		title: 'No free parallel workers',
		what: 'Other statements or maintenance held the worker slots.'
	},
	'jit-overhead': {
		id: 'jit-overhead',
		title: 'Compiling that does not pay',
		what: 'The estimated cost switched just-in-time compiling on for a statement that is quick.'
	},
	'deep-offset': {
		id: 'deep-offset',
		title: 'Paging by offset',
		what: 'Later pages make the server work through all earlier ones.'
	},
	'cold-cache': {
		id: 'cold-cache',
		title: 'Cold cache',
		what: 'The blocks were not in memory: after a restart, a switch-over, or for data that is seldom read.'
	},
	'temp-table-limits': {
		id: 'temp-table-limits',
		title: 'Temporary-table limit too low',
		what: 'Internal temporary tables outgrow their limit in memory and go on on disk.'
	},
	'join-without-index': {
		id: 'join-without-index',
		title: 'Join without an index',
		what: 'The columns of a join have no index, so that one side is read for every row of the other.'
	}
};
