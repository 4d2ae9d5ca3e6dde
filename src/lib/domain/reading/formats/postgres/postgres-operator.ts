import { BOUNDS } from '../../bounds';
import { walkOperators, type OperatorFacts, type PlanOperator } from '../../operator';
import type { ReadingWarning } from '../../reading';
import { add, largest } from './memory-facts';
import { readFacts } from './operator-facts';
import { operatorKind, operatorName } from './operator-name';
import { figure, records, words, type PlanNode } from './plan-node';
import { fillOwnShares, type SharedFigure } from './shares';

const BLOCK_BYTES = 8192;

/** The operator tree of a plan node. What lies beyond the bounds is left out, with a warning for it. */
export function toOperators(root: PlanNode, warnings: ReadingWarning[]): PlanOperator {
	const tree = new TreeBuilder();
	const operator = tree.build(root, '0', 0);
	warnings.push(...tree.warnings());
	fillOwnFigures(operator);
	return operator;
}

class TreeBuilder {
	private count = 0;
	private tooDeep = false;
	private tooMany = false;

	build(node: PlanNode, path: string, depth: number): PlanOperator {
		this.count++;
		const operator = toOperator(node, path);
		const plans = records(node['Plans']);
		if (plans.length > 0 && depth + 1 >= BOUNDS.nesting) this.tooDeep = true;
		else {
			for (const plan of plans) {
				if (this.count >= BOUNDS.operators) {
					this.tooMany = true;
					break;
				}
				operator.children.push(this.build(plan, `${path}.${operator.children.length}`, depth + 1));
			}
		}
		return operator;
	}

	warnings(): ReadingWarning[] {
		const found: ReadingWarning[] = [];
		if (this.tooDeep) {
			const message = `The plan nests deeper than ${BOUNDS.nesting} levels; what lies below was left out.`;
			found.push({ code: 'too-deep', message, at: null });
		}
		if (this.tooMany) {
			const message = `The plan has more than ${BOUNDS.operators} operators; the rest was left out.`;
			found.push({ code: 'too-many-operators', message, at: null });
		}
		return found;
	}
}

function toOperator(node: PlanNode, path: string): PlanOperator {
	const facts = readFacts(node, words(node['Node Type']) ?? '');
	const loops = figure(node['Actual Loops']);
	const ratio = driftRatio(facts);
	const relation = words(node['Relation Name']) ?? facts.cteName ?? facts.functionName;
	return {
		path,
		kind: operatorKind(node),
		name: operatorName(node),
		relation,
		alias: words(node['Alias']) ?? relation,
		condition: tellingCondition(facts),
		estimatedRows: times(facts.plannedRowsPerLoop, loops === null || loops === 0 ? 1 : loops),
		actualRows: times(facts.actualRowsPerLoop, loops ?? 1),
		loops,
		width: figure(node['Plan Width']),
		selfMs: null,
		totalMs: facts.neverExecuted ? null : times(figure(node['Actual Total Time']), loops ?? 1),
		memoryKb: peakMemoryKb(facts),
		memoryLimitKb: null,
		batches: largest([facts.hash?.batches ?? null, ...facts.aggregates.map((part) => part.batches)]),
		plannedBatches: facts.hash?.plannedBatches ?? null,
		temporaryBytes: null,
		discardedRows: times(
			add(add(facts.removedByFilter, facts.removedByJoinFilter), facts.removedByRecheck),
			loops ?? 1
		),
		ratio,
		qError: ratio === null ? null : Math.max(ratio, 1 / ratio),
		children: [],
		facts
	};
}

/** Binary fractions of sums such as 0.1 x 3 are rounded away; a total has no digit below a millionth. */
function times(perLoop: number | null, loops: number): number | null {
	if (perLoop === null) return null;
	const total = perLoop * loops;
	return total < 1e9 ? Math.round(total * 1e6) / 1e6 : total;
}

/** Actual / expected rows of one loop, both at least 1 (Moerkotte et al., q-error). */
function driftRatio(facts: OperatorFacts): number | null {
	if (facts.actualRowsPerLoop === null || facts.plannedRowsPerLoop === null) return null;
	return Math.max(facts.actualRowsPerLoop, 1) / Math.max(facts.plannedRowsPerLoop, 1);
}

function tellingCondition(facts: OperatorFacts): string | null {
	const join = facts.hashCondition ?? facts.mergeCondition ?? facts.joinFilter;
	if (join !== null) return join;
	const parts = [facts.indexCondition ?? facts.recheckCondition, facts.filter, ...facts.otherConditions];
	const known = parts.filter((part) => part !== null);
	if (known.length > 0) return known.join(' AND ');
	const keys = facts.sortKey.length > 0 ? facts.sortKey : facts.groupKey;
	return keys.length > 0 ? keys.join(', ') : null;
}

function peakMemoryKb(facts: OperatorFacts): number | null {
	return largest([
		facts.hash?.peakKb ?? null,
		facts.memoize?.peakKb ?? null,
		...facts.aggregates.map((part) => part.peakKb),
		...facts.sorts.map((sort) => (sort.onDisk ? null : sort.usedKb)),
		facts.storage !== null && !facts.storage.onDisk ? facts.storage.maximumKb : null
	]);
}

const sameWeight = (_parent: PlanOperator, value: number) => value;

const WRITTEN: SharedFigure = {
	inclusive: ({ facts }) => facts.tempWrittenBlocks,
	own: ({ facts }) => facts.ownTempWrittenBlocks,
	setOwn: ({ facts }, value) => (facts.ownTempWrittenBlocks = value),
	asParent: sameWeight
};
const READ: SharedFigure = {
	inclusive: ({ facts }) => facts.tempReadBlocks,
	own: ({ facts }) => facts.ownTempReadBlocks,
	setOwn: ({ facts }, value) => (facts.ownTempReadBlocks = value),
	asParent: sameWeight
};
const TIME: SharedFigure = {
	inclusive: ({ totalMs }) => totalMs,
	own: ({ selfMs }) => selfMs,
	setOwn: (operator, value) => (operator.selfMs = value),
	asParent: wallTime
};

function fillOwnFigures(root: PlanOperator): void {
	for (const figure of [WRITTEN, READ, TIME]) fillOwnShares(root, figure);
	for (const operator of walkOperators(root)) {
		const { ownTempWrittenBlocks } = operator.facts;
		operator.selfMs = times(operator.selfMs, 1);
		operator.temporaryBytes =
			ownTempWrittenBlocks === null ? reportedDiskBytes(operator.facts) : ownTempWrittenBlocks * BLOCK_BYTES;
	}
}

/** A Gather waits for its processes side by side: what they took together passes in a share of that time. */
function wallTime(parent: PlanOperator, value: number): number {
	if (parent.kind !== 'gather') return value;
	return value / ((parent.facts.workersLaunched ?? 0) + 1);
}

/** Without block counts, what a sort or an aggregate says of its own files. */
function reportedDiskBytes(facts: OperatorFacts): number | null {
	const sorts = facts.sorts.map((sort) => (sort.onDisk ? sort.usedKb : 0));
	const aggregates = facts.aggregates.map((part) => part.diskKb);
	const sum = [...sorts, ...aggregates].reduce<number | null>(add, null);
	return sum === null ? null : sum * 1024;
}
