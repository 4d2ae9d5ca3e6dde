import { noFacts, type OperatorFacts } from '../../operator';
import { add, memoryFacts } from './memory-facts';
import { estimate, figure, isRecord, isTrue, records, wordList, words, type PlanNode } from './plan-node';

const ROLES: Record<string, OperatorFacts['role']> = {
	Outer: 'outer',
	Inner: 'inner',
	Member: 'member',
	Subquery: 'subquery',
	InitPlan: 'init-plan',
	SubPlan: 'sub-plan'
};

/** Everything that PostgreSQL prints of one node, figures per loop where it prints them per loop. */
export function readFacts(node: PlanNode, type: string): OperatorFacts {
	const facts = noFacts();
	const loops = figure(node['Actual Loops']);
	facts.neverExecuted = loops === 0;
	facts.plannedRowsPerLoop = estimate(node['Plan Rows']);
	facts.actualRowsPerLoop = loops === 0 ? null : figure(node['Actual Rows']);
	facts.joinType = words(node['Join Type'])?.toLowerCase().replace(' ', '-') ?? null;
	facts.strategy = words(node['Strategy'])?.toLowerCase() ?? null;
	facts.partialMode = words(node['Partial Mode'])?.toLowerCase() ?? null;
	facts.parallelAware = isTrue(node['Parallel Aware']);
	facts.innerUnique = node['Inner Unique'] === undefined ? null : isTrue(node['Inner Unique']);
	facts.schema = words(node['Schema']);
	facts.indexName = words(node['Index Name']);
	facts.cteName = words(node['CTE Name']);
	facts.functionName = words(node['Function Name']) ?? words(node['Table Function Name']);
	readPlace(node, facts);
	readConditions(node, facts);
	readCounts(node, facts, type);
	Object.assign(facts, memoryFacts(node, type));
	readExtra(node, facts);
	return facts;
}

function readPlace(node: PlanNode, facts: OperatorFacts): void {
	facts.subplanName = words(node['Subplan Name']);
	const role = words(node['Parent Relationship']);
	facts.role = role !== null && Object.hasOwn(ROLES, role) ? (ROLES[role] ?? null) : null;
	// A CTE hangs under its owner as an InitPlan; only its name tells it from one.
	if (facts.subplanName?.startsWith('CTE ')) facts.role = 'cte';
}

const OTHER_CONDITIONS = ['TID Cond', 'One-Time Filter', 'Run Condition', 'Order By', 'Conflict Filter'];

function readConditions(node: PlanNode, facts: OperatorFacts): void {
	facts.filter = words(node['Filter']);
	facts.joinFilter = words(node['Join Filter']);
	facts.indexCondition = words(node['Index Cond']);
	facts.recheckCondition = words(node['Recheck Cond']);
	facts.hashCondition = words(node['Hash Cond']);
	facts.mergeCondition = words(node['Merge Cond']);
	for (const key of OTHER_CONDITIONS) facts.otherConditions.push(...wordList(node[key]));
	facts.sortKey = wordList(node['Sort Key']);
	facts.presortedKey = wordList(node['Presorted Key']);
	facts.groupKey = node['Grouping Sets'] === undefined ? wordList(node['Group Key']) : groupingSets(node);
}

/** Each set of GROUPING SETS as the text form prints it: "a, b", and "()" for the grand total. */
function groupingSets(node: PlanNode): string[] {
	return records(node['Grouping Sets']).flatMap((set) =>
		['Group Keys', 'Hash Keys'].flatMap((key) => {
			const sets = set[key];
			if (!Array.isArray(sets)) return [];
			return sets.map((columns) => wordList(columns).join(', ') || '()');
		})
	);
}

function readCounts(node: PlanNode, facts: OperatorFacts, type: string): void {
	const ran = facts.actualRowsPerLoop !== null;
	// The text form leaves zeros out: a condition of a node that ran without a figure removed nothing.
	const removed = (key: string, condition: boolean) =>
		ran ? (figure(node[key]) ?? (condition ? 0 : null)) : null;
	const rechecks = type === 'Bitmap Heap Scan' || type === 'Index Scan' || type === 'Index Only Scan';
	facts.removedByFilter = removed('Rows Removed by Filter', facts.filter !== null);
	facts.removedByJoinFilter = removed('Rows Removed by Join Filter', facts.joinFilter !== null);
	facts.removedByRecheck = removed(
		'Rows Removed by Index Recheck',
		rechecks && (facts.recheckCondition ?? facts.indexCondition) !== null
	);
	facts.heapFetches = ran ? figure(node['Heap Fetches']) : null;
	if (type === 'Bitmap Heap Scan' && ran) {
		facts.exactBlocks = overProcesses(node, 'Exact Heap Blocks') ?? 0;
		facts.lossyBlocks = overProcesses(node, 'Lossy Heap Blocks') ?? 0;
	}
	facts.workersPlanned = figure(node['Workers Planned']);
	facts.workersLaunched = figure(node['Workers Launched']);
	facts.sharedHitBlocks = figure(node['Shared Hit Blocks']);
	facts.sharedReadBlocks = figure(node['Shared Read Blocks']);
	facts.tempReadBlocks = figure(node['Temp Read Blocks']);
	facts.tempWrittenBlocks = figure(node['Temp Written Blocks']);
}

/** 18 prints the bitmap's blocks of each worker beside the leader's; before, the leader's alone. */
function overProcesses(node: PlanNode, key: string): number | null {
	return records(node['Workers']).reduce<number | null>(
		(sum, worker) => add(sum, figure(worker[key])),
		figure(node[key])
	);
}

/** Keys that have a field of their own or are printed always and say nothing. */
const KNOWN = new Set(
	(
		'Node Type,Parent Relationship,Subplan Name,Strategy,Partial Mode,Parallel Aware,Async Capable,Join Type,' +
		'Inner Unique,Relation Name,Schema,Alias,Index Name,CTE Name,Function Name,Table Function Name,' +
		'Custom Plan Provider,Startup Cost,Total Cost,Plan Rows,Plan Width,Actual Startup Time,Actual Total Time,' +
		'Actual Rows,Actual Loops,Output,Filter,Join Filter,Index Cond,Recheck Cond,Hash Cond,Merge Cond,Sort Key,' +
		'Presorted Key,Group Key,Grouping Sets,Rows Removed by Filter,Rows Removed by Join Filter,' +
		'Rows Removed by Index Recheck,Heap Fetches,Exact Heap Blocks,Lossy Heap Blocks,Workers Planned,' +
		'Workers Launched,Shared Hit Blocks,Shared Read Blocks,Shared Dirtied Blocks,Shared Written Blocks,' +
		'Local Hit Blocks,Local Read Blocks,Local Dirtied Blocks,Local Written Blocks,Temp Read Blocks,' +
		'Temp Written Blocks,I/O Read Time,I/O Write Time,Temp I/O Read Time,Temp I/O Write Time,' +
		'Shared I/O Read Time,Shared I/O Write Time,Local I/O Read Time,Local I/O Write Time,WAL Records,WAL FPI,' +
		'WAL Bytes,WAL Buffers Full,Hash Buckets,Original Hash Buckets,Hash Batches,Original Hash Batches,' +
		'Peak Memory Usage,Sort Method,Sort Space Used,Sort Space Type,Full-sort Groups,Pre-sorted Groups,' +
		'Planned Partitions,HashAgg Batches,Disk Usage,Cache Hits,Cache Misses,Cache Evictions,Cache Overflows,' +
		'Storage,Maximum Storage,Plans,Workers,JIT,Group Sets,' +
		OTHER_CONDITIONS.join(',')
	).split(',')
);

function readExtra(node: PlanNode, facts: OperatorFacts): void {
	for (const key in node) {
		if (KNOWN.has(key)) continue;
		const value = node[key];
		// The text form leaves these out.
		if (
			value === false ||
			value === 0 ||
			value === '0' ||
			value === 'false' ||
			value === 'Forward' ||
			isRecord(value)
		)
			continue;
		if (typeof value === 'string' || typeof value === 'number' || value === true)
			facts.extra[key] = String(value);
		else if (Array.isArray(value)) facts.extra[key] = wordList(value).join(', ');
	}
}
