import { noFacts, type OperatorFacts } from '../../operator';
import { add, memoryFacts } from './memory-facts';
import { estimate, figure, isTrue, records, wordList, words, type PlanNode } from './plan-node';

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

/** Keys without a field of their own that tell operators apart. */
const EXTRA = [
	'Scan Direction',
	'Subplans Removed',
	'Index Searches',
	'Window',
	'Cache Key',
	'Cache Mode',
	'Function Call',
	'Conflict Resolution',
	'Disabled',
	'Remote SQL'
];

function readExtra(node: PlanNode, facts: OperatorFacts): void {
	for (const key of EXTRA) {
		const value = node[key];
		// The text form leaves these out.
		if (value === undefined || value === false || value === 'false' || value === 'Forward') continue;
		if (value === 0 || value === '0') continue;
		if (typeof value === 'string' || typeof value === 'number' || value === true)
			facts.extra[key] = String(value);
	}
}
