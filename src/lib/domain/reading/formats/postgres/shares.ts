import type { PlanOperator } from '../../operator';

/** One figure of a plan: as printed, with everything below, and as it is worked out for the operator alone. */
export interface SharedFigure {
	inclusive(operator: PlanOperator): number | null;
	own(operator: PlanOperator): number | null;
	setOwn(operator: PlanOperator, value: number | null): void;
	/** What a child's figure weighs in its parent's. */
	asParent(parent: PlanOperator, value: number): number;
}

/**
 * Works out what each operator took for itself, of a figure that PostgreSQL prints with everything below it.
 *
 * - Ordinary children and SubPlans count inside the operator that they hang under.
 * - InitPlans and CTEs do not: whoever reads their rows first is charged with them. That is a CTE Scan of that
 *   name, a node whose condition names the parameter, or else the owner itself (its target list is not printed).
 *   Which of several readers came first is not printed either, so the largest share pays first.
 * - Below Gather, figures are sums over processes, Gather's own is wall time: `asParent` turns one into the other.
 */
export function fillOwnShares(root: PlanOperator, figure: SharedFigure): void {
	const deferred: { owner: PlanOperator; plan: PlanOperator }[] = [];
	const stack = [root];
	for (let next = stack.pop(); next !== undefined; next = stack.pop()) {
		let rest = figure.inclusive(next);
		for (const child of next.children) {
			stack.push(child);
			if (isDeferred(child)) deferred.push({ owner: next, plan: child });
			else if (rest !== null) rest -= figure.asParent(next, figure.inclusive(child) ?? 0);
		}
		figure.setOwn(next, rest === null ? null : Math.max(0, rest));
	}
	for (const { owner, plan } of deferred) charge(owner, plan, figure);
}

function isDeferred(child: PlanOperator): boolean {
	return child.facts.role === 'init-plan' || child.facts.role === 'cte';
}

function charge(owner: PlanOperator, plan: PlanOperator, figure: SharedFigure): void {
	let left = figure.inclusive(plan) ?? 0;
	if (left <= 0) return;
	const payers = readersOf(owner, plan);
	if (payers.length === 0) payers.push(owner);
	payers.sort((a, b) => (figure.own(b) ?? 0) - (figure.own(a) ?? 0));
	for (const payer of payers) {
		const has = figure.own(payer) ?? 0;
		const pays = Math.min(has, left);
		if (pays > 0) figure.setOwn(payer, has - pays);
		left -= pays;
	}
}

/** Everything under the owner that reads the rows or the parameter of its InitPlan or CTE. */
function readersOf(owner: PlanOperator, plan: PlanOperator): PlanOperator[] {
	const reads = plan.facts.role === 'cte' ? readsCte(plan) : readsParameter(plan);
	if (reads === null) return [];
	const found: PlanOperator[] = [];
	const stack = [owner];
	for (let next = stack.pop(); next !== undefined; next = stack.pop()) {
		if (reads(next)) found.push(next);
		for (const child of next.children) if (child !== plan) stack.push(child);
	}
	return found;
}

function readsCte(plan: PlanOperator): (operator: PlanOperator) => boolean {
	const name = plan.facts.subplanName?.slice('CTE '.length);
	return (operator) =>
		operator.kind === 'cte-scan' && operator.facts.cteName === name && operator.name === 'CTE Scan';
}

/** "InitPlan 2 (returns $1,$2)" up to 16; "InitPlan 2" from 17 on, read as "(InitPlan 2).col1". */
function readsParameter(plan: PlanOperator): ((operator: PlanOperator) => boolean) | null {
	const name = plan.facts.subplanName;
	if (name === null) return null;
	const returned = /\(returns ([^)]*)\)/.exec(name)?.[1];
	const marks = returned === undefined ? [`(${name})`] : returned.split(',').map((mark) => mark.trim());
	const patterns = marks.map((mark) =>
		mark.startsWith('$') ? new RegExp(`\\$${mark.slice(1).replace(/\D/g, '')}(?!\\d)`) : mark
	);
	return (operator) =>
		conditionsOf(operator).some((text) =>
			patterns.some((pattern) => (typeof pattern === 'string' ? text.includes(pattern) : pattern.test(text)))
		);
}

function conditionsOf({ facts }: PlanOperator): string[] {
	const list = [
		facts.filter,
		facts.joinFilter,
		facts.indexCondition,
		facts.recheckCondition,
		facts.hashCondition,
		facts.mergeCondition,
		...facts.otherConditions
	];
	return list.filter((text): text is string => text !== null);
}
