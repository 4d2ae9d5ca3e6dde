/**
 * Keys of a plan whose values are names or words of the engine and never hold a literal. Everything that is not
 * here is masked like SQL, so that a key that a later version adds can't let data through.
 */
const PLAIN_KEYS = new Set(
	(
		'Node Type,Parent Relationship,Subplan Name,Strategy,Partial Mode,Join Type,Relation Name,Schema,Alias,' +
		'Index Name,CTE Name,Function Name,Table Function Name,Tuplestore Name,Custom Plan Provider,Operation,Command,' +
		'Scan Direction,Parallel Aware,Async Capable,Single Copy,Inner Unique,Disabled,Startup Cost,Total Cost,' +
		'Plan Rows,Plan Width,Actual Startup Time,Actual Total Time,Actual Rows,Actual Loops,Sort Method,' +
		'Sort Space Used,Sort Space Type,Sort Methods Used,Full-sort Groups,Pre-sorted Groups,Group Count,' +
		'Average Sort Space Used,Peak Sort Space Used,Buckets,Batches,Hash Buckets,Original Hash Buckets,Hash Batches,' +
		'Original Hash Batches,Peak Memory Usage,Planned Partitions,HashAgg Batches,Memory Usage,Disk Usage,Hits,' +
		'Cache Mode,Cache Hits,Cache Misses,Cache Evictions,Cache Overflows,Heap Blocks,Exact Heap Blocks,' +
		'Lossy Heap Blocks,Heap Fetches,Index Searches,Rows Removed by Filter,Rows Removed by Join Filter,' +
		'Rows Removed by Index Recheck,Rows Removed by Conflict Filter,Subplans Removed,Workers Planned,' +
		'Workers Launched,Worker Number,Storage,Maximum Storage,Buffers,I/O Timings,WAL,WAL Records,WAL FPI,WAL Bytes,' +
		'WAL Buffers Full,Planning,Planning Time,Planning time,Execution Time,Execution time,Total runtime,' +
		'Query Identifier,JIT,Functions,Options,Timing,Generation,Deform,Inlining,Optimization,Expressions,Deforming,' +
		'Emission,Total,Memory,Memory Used,Memory Allocated,Serialization,Time,Output Volume,Format,Calls,' +
		'Trigger Name,Constraint Name,Relation,Tuples Inserted,Conflicting Tuples,Tuples Updated,Tuples Deleted,' +
		'Tuples Skipped,Conflict Resolution,Conflict Arbiter Indexes,Estimates,Capacity,Distinct Keys,Lookups,Hit Percent'
	).split(',')
);
const PLAIN_PREFIX =
	/^(?:(?:Shared|Local|Temp) (?:Hit|Read|Dirtied|Written) Blocks|(?:(?:Shared|Local|Temp) )?I\/O (?:Read|Write) Time)$/;

/** Whether the values of a key are kept as they are. */
export function isPlainKey(key: string): boolean {
	return PLAIN_KEYS.has(key) || PLAIN_PREFIX.test(key);
}
