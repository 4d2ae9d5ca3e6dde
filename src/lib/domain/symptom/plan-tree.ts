import { walkOperators, type PlanOperator } from '../reading/operator';

/** A plan's operators with what rules ask of their place in the tree. Built once a plan, in one walk. */
export interface PlanTree {
	/** In the order in which the engine prints them. */
	operators: readonly PlanOperator[];
	parentOf(operator: PlanOperator): PlanOperator | null;
	/** Whether something above may have stopped the operator before its end, so that fewer rows than expected are no error. */
	mayStopEarly(operator: PlanOperator): boolean;
}

/** The tree of a plan. */
export function toPlanTree(root: PlanOperator): PlanTree {
	const operators = [...walkOperators(root)];
	const parents = new Map<PlanOperator, PlanOperator>();
	for (const operator of operators) for (const child of operator.children) parents.set(child, operator);
	const stopped = new Set<PlanOperator>();
	for (const operator of operators) {
		for (const child of operator.children) {
			if (stopsChild(operator, child) || (stopped.has(operator) && !readsAll(operator, child)))
				stopped.add(child);
		}
	}
	stopSharedTables(operators, stopped);
	return {
		operators,
		parentOf: (operator) => parents.get(operator) ?? null,
		mayStopEarly: (operator) => stopped.has(operator)
	};
}

/** Whether an operator may leave rows of this child unread, whatever is above it. */
function stopsChild(operator: PlanOperator, child: PlanOperator): boolean {
	const { role } = child.facts;
	// EXISTS and IN stop at the first match; a plan does not print which kind of subquery it is.
	if (role === 'sub-plan' || role === 'init-plan') return true;
	switch (operator.kind) {
		case 'limit':
		case 'merge-join':
			return true;
		case 'nested-loop':
			return role === 'inner' && stopsAtFirstMatch(operator);
		case 'hash-join':
			return role === 'outer' && hasEmptyBuild(operator);
		case 'window':
			// A run condition ("Run Condition", 15 and newer) ends the window early.
			return operator.facts.otherConditions.length > 0;
		default:
			return false;
	}
}

function stopsAtFirstMatch({ facts }: PlanOperator): boolean {
	return facts.innerUnique === true || facts.joinType === 'semi' || facts.joinType === 'anti';
}

/** With nothing to match, the probing side is not read to its end (nodeHashjoin.c). */
function hasEmptyBuild(join: PlanOperator): boolean {
	return join.children.some((child) => child.kind === 'hash-build' && child.actualRows === 0);
}

/** Whether an operator reads this child to its end before it gives back its first row. */
function readsAll(operator: PlanOperator, child: PlanOperator): boolean {
	const { kind, facts } = operator;
	if (child.facts.role === 'cte') return true;
	if (kind === 'sort' || kind === 'hash-build' || kind === 'hash-aggregate' || kind === 'bitmap-scan')
		return true;
	return kind === 'group-aggregate' && facts.strategy === 'plain';
}

/** A WITH query is read by its CTE Scans: where one of them may stop, so may the query. */
function stopSharedTables(operators: readonly PlanOperator[], stopped: Set<PlanOperator>): void {
	const stoppedNames = new Set<string>();
	for (const operator of operators) {
		const { cteName } = operator.facts;
		if (operator.kind === 'cte-scan' && cteName !== null && stopped.has(operator)) stoppedNames.add(cteName);
	}
	if (stoppedNames.size === 0) return;
	for (const operator of operators) {
		const name = operator.facts.role === 'cte' ? operator.facts.subplanName?.replace(/^CTE /, '') : undefined;
		if (name !== undefined && stoppedNames.has(name)) stopDown(operator, stopped);
	}
}

function stopDown(operator: PlanOperator, stopped: Set<PlanOperator>): void {
	stopped.add(operator);
	for (const child of operator.children) if (!readsAll(operator, child)) stopDown(child, stopped);
}
