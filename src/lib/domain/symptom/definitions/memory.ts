import { MOST_AGGREGATE_BATCHES } from '../rules/aggregate-spill';
import { MOST_LOSSY_BLOCKS } from '../rules/bitmap-lossy';
import { LEAST_BUILD_RATIO, LEAST_BUILD_ROWS } from '../rules/build-side-larger';
import { MOST_BATCHES } from '../rules/hash-spill';
import { MOST_STORED_BLOCKS } from '../rules/materialize-spill';
import { LEAST_DOUBLING, LEAST_OVERRUN } from '../rules/skewed-hash';
import { MOST_SORT_FILES } from '../rules/sort-spill';
import type { SymptomId } from '../symptom';
import type { SymptomDefinition } from './definition';

/** Symptoms of memory that did not suffice. */
export const MEMORY_SYMPTOMS = {
	'hash-spill': {
		id: 'hash-spill',
		title: 'Hash table spilled',
		what: 'A hash join builds a table of its smaller input. When the table does not fit into its memory it is split into batches: one stays, the others go to temporary files with the matching rows of the other input, and are read again one by one. Planned means that the planner knew; grown means that it found out while building.',
		recognise:
			'PostgreSQL: "Batches" above 1 at the Hash, with "originally" where they grew. Temporary blocks at the Hash are the build side’s, those of the join above it the probing side’s.',
		thresholds: [MOST_BATCHES],
		usualCauses: [
			'stale-statistics',
			'undersized-memory',
			'correlated-predicates',
			'wrong-build-side',
			'skewed-join-key'
		]
	},
	'sort-spill': {
		id: 'sort-spill',
		title: 'Sort went to disk',
		what: 'A sort that outgrows its memory writes sorted runs to temporary files and merges them. On disk the rows take about half of what they would need in memory, so the size on disk is never the setting that helps.',
		recognise:
			'PostgreSQL: "Sort Method: external merge  Disk: …". An aggregate with ORDER BY, DISTINCT or WITHIN GROUP sorts inside itself: only its temporary blocks show it. MariaDB: sort passes above 0.',
		thresholds: [MOST_SORT_FILES],
		usualCauses: [
			'undersized-memory',
			'stale-statistics',
			'deep-offset',
			'missing-index',
			'nested-loop-by-misestimate'
		]
	},
	'aggregate-spill': {
		id: 'aggregate-spill',
		title: 'Hash aggregate spilled',
		what: 'A hash aggregate keeps one entry for each group. Once its memory is full, input rows of groups that it does not hold yet go to files and are worked off in further batches, which may spill again.',
		recognise:
			'PostgreSQL 13 and newer: "Batches" above 1 or "Disk Usage" at a HashAggregate. "Planned Partitions: 0" says that the planner did not expect it.',
		thresholds: [MOST_AGGREGATE_BATCHES],
		usualCauses: ['misjudged-distinct-count', 'undersized-memory', 'stale-statistics']
	},
	'materialize-spill': {
		id: 'materialize-spill',
		title: 'Stored rows went to disk',
		what: 'Rows that are kept aside to be read again (a WITH query, the frame of a window, a materialised input, the result of a function) did not fit into memory.',
		recognise:
			'PostgreSQL: temporary blocks that a CTE Scan, WindowAgg, Materialize or Function Scan wrote beyond those of its inputs; "Storage: Disk" from 18 on. The reader that came first is charged with them.',
		thresholds: [MOST_STORED_BLOCKS],
		usualCauses: ['undersized-memory', 'join-without-index']
	},
	'temp-table-on-disk': {
		id: 'temp-table-on-disk',
		title: 'Internal temporary table on disk',
		what: 'The engine groups or removes duplicates in a temporary table of its own. When that outgrows its limit it is turned into a table on disk and carries on there, with a lookup for every row.',
		recognise: 'MariaDB slow log: "Tmp_table_on_disk: Yes" or "Tmp_disk_tables" above 0.',
		thresholds: [],
		usualCauses: ['temp-table-limits', 'undersized-memory']
	},
	'skewed-hash': {
		id: 'skewed-hash',
		title: 'Hash table that cannot be split',
		what: 'Rows with the same key always land in the same batch. Where a few keys (or NULL) hold most rows, the batches double again and again without making the largest one smaller, and the table stays above its limit.',
		recognise:
			'PostgreSQL: "Memory Usage" of a Hash well above work_mem × hash_mem_multiplier with more than one batch, or thousands of batches where a few were planned. From 18 on a somewhat larger table is chosen on purpose at small settings and is no skew.',
		thresholds: [LEAST_OVERRUN, LEAST_DOUBLING],
		usualCauses: ['skewed-join-key', 'stale-statistics']
	},
	'build-side-larger': {
		id: 'build-side-larger',
		title: 'The larger side was hashed',
		what: 'A hash join pays for the rows that it hashes. Here that was the side with several times as many rows as the other: it was expected to be small, or there was no index to look the few up with.',
		recognise: 'Rows of the Hash against rows of the other input of the join.',
		thresholds: [LEAST_BUILD_RATIO, LEAST_BUILD_ROWS],
		usualCauses: ['wrong-build-side', 'missing-index', 'stale-statistics', 'misjudged-distinct-count']
	},
	'bitmap-lossy': {
		id: 'bitmap-lossy',
		title: 'Bitmap became lossy',
		what: 'A bitmap that outgrows its memory forgets single rows and remembers whole blocks. Every row of those blocks is read and checked again.',
		recognise:
			'PostgreSQL: "Heap Blocks: exact=… lossy=…" and "Rows Removed by Index Recheck" at a Bitmap Heap Scan.',
		thresholds: [MOST_LOSSY_BLOCKS],
		usualCauses: ['undersized-memory']
	},
	'grant-too-small': {
		id: 'grant-too-small',
		title: 'Memory grant too small',
		what: 'Engines that grant memory before a statement starts size the grant by the estimate. This one was smaller than what was needed.',
		recognise: 'Showplan XML: granted memory below what was used or wished for, with a spill warning.',
		thresholds: [],
		usualCauses: ['stale-statistics', 'correlated-predicates']
	},
	'grant-unused': {
		id: 'grant-unused',
		title: 'Memory grant mostly unused',
		what: 'The statement was given many times what it used. While it ran, others waited for that memory.',
		recognise: 'Showplan XML: granted memory at least ten times the used, and 64 MB or more.',
		thresholds: [],
		usualCauses: ['stale-statistics', 'misjudged-distinct-count']
	},
	'grant-wait': {
		id: 'grant-wait',
		title: 'Waited for a memory grant',
		what: 'The statement stood in the queue for memory before it could start. What held the memory is seldom in its own plan.',
		recognise: 'Showplan XML: a wait time at the memory grant, in seconds.',
		thresholds: [],
		usualCauses: ['undersized-memory']
	}
} satisfies Partial<Record<SymptomId, SymptomDefinition>>;
