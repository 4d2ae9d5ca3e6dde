import { beginsStatement } from '../statement-above';
import { fillZeroBlocks } from './buffers';
import { readNodeLine } from './node-line';
import { childrenOf, relationshipOf } from './node-words';
import { takeProperty } from './properties';
import { records, type PlanEnvelope, type PlanNode } from '../postgres/plan-node';

/** An open node, or the label of a subplan whose node follows two columns further right. */
interface Level {
	column: number;
	node: PlanNode;
	label: string | null;
}

/** Builds one plan from its lines. The parent of a line is the nearest line above it that stands further left. */
export class PlanBuilder {
	readonly envelope: PlanEnvelope;
	/** True once the lines below the tree (times, settings) have begun. */
	ended = false;
	private readonly nodes: PlanNode[];
	private readonly levels: Level[];
	private readonly fed = new Set<PlanNode>();
	private last: PlanNode;
	private worker: { column: number; figures: PlanNode } | null = null;
	private open: { key: string; value: string; into: PlanNode } | null = null;
	/** Nodes under an arrow that don't stand right of the root: the paste lost its indentation. */
	private flat = 0;

	constructor(
		private readonly rootColumn: number,
		root: PlanNode
	) {
		this.envelope = { Plan: root };
		this.nodes = [root];
		this.levels = [{ column: rootColumn, node: root, label: null }];
		this.last = root;
	}

	addNode(column: number, text: string): void {
		const node = readNodeLine(text, true);
		if (node === null) return;
		if (column <= this.rootColumn) this.flat++;
		const { node: parent, label } = this.enter(column);
		if (label !== null) {
			node['Subplan Name'] = label;
			node['Parent Relationship'] = label.startsWith('SubPlan') ? 'SubPlan' : 'InitPlan';
		}
		adopt(parent, node, this.fed);
		this.nodes.push(node);
		this.levels.push({ column, node, label: null });
		this.last = node;
		this.worker = null;
		this.open = null;
	}

	addLabel(column: number, label: string): void {
		const { node } = this.enter(column);
		this.levels.push({ column, node, label });
		this.worker = null;
		this.open = null;
	}

	/** "Worker 0:  Sort Method: …" or "Worker 0:  actual time=… rows=… loops=…", its further lines below it. */
	addWorker(column: number, number: string): void {
		const workers = records(this.last['Workers']);
		let figures = workers.find((each) => each['Worker Number'] === number);
		if (figures === undefined) {
			figures = { 'Worker Number': number };
			this.last['Workers'] = [...workers, figures];
		}
		this.worker = { column, figures };
	}

	addProperty(column: number, key: string, value: string): void {
		if (this.worker !== null && column <= this.worker.column) this.worker = null;
		const into = this.worker?.figures ?? this.last;
		takeProperty(key, value, into, this.last);
		this.open = isOpen(value) ? { key, value, into } : null;
	}

	/** Appends a line to a property that a line break cut; false: there is none. */
	continueProperty(text: string): boolean {
		if (this.open === null) return false;
		const { key, into } = this.open;
		const value = `${this.open.value} ${text}`;
		takeProperty(key, value, into, this.last);
		this.open = isOpen(value) ? { key, value, into } : null;
		return true;
	}

	/** Whether a line stands no further right than the root and begins a statement: the plan is over. */
	isOverAt(column: number, text: string): boolean {
		return column <= this.rootColumn && beginsStatement(text);
	}

	/** Finishes the tree; true: its nesting had to be worked out from what each operator takes. */
	finish(): boolean {
		fillZeroBlocks(this.nodes);
		if (this.flat === 0) return false;
		nestByArity(this.nodes);
		return true;
	}

	private enter(column: number): Level {
		let top = this.levels[this.levels.length - 1];
		while (this.levels.length > 1 && top !== undefined && top.column >= column) {
			this.levels.pop();
			top = this.levels[this.levels.length - 1];
		}
		return top ?? { column: this.rootColumn, node: this.last, label: null };
	}
}

/** Puts a node under its parent. Whether a parent has an ordinary child already is kept beside the tree. */
function adopt(parent: PlanNode, node: PlanNode, fed: Set<PlanNode>): void {
	const plans = Array.isArray(parent['Plans']) ? parent['Plans'] : [];
	if (node['Subplan Name'] === undefined) {
		node['Parent Relationship'] = relationshipOf(parent['Node Type'], fed.has(parent) ? 1 : 0);
		fed.add(parent);
	}
	plans.push(node);
	parent['Plans'] = plans;
}

function isOpen(value: string): boolean {
	let depth = 0;
	for (const mark of value) {
		if (mark === '(') depth++;
		else if (mark === ')') depth--;
	}
	return depth > 0;
}

/** Without indentation, operators in printed order nest by how many inputs each takes; lists take what is left. */
function nestByArity(nodes: PlanNode[]): void {
	const wanting: { node: PlanNode; left: number }[] = [];
	const fed = new Set<PlanNode>();
	for (const node of nodes) {
		delete node['Plans'];
		while (wanting.length > 0 && wanting[wanting.length - 1]?.left === 0) wanting.pop();
		const parent = wanting[wanting.length - 1];
		if (parent !== undefined) {
			parent.left--;
			delete node['Subplan Name'];
			adopt(parent.node, node, fed);
		} else if (node !== nodes[0] && nodes[0] !== undefined) adopt(nodes[0], node, fed);
		wanting.push({ node, left: childrenOf(node['Node Type']) ?? Infinity });
	}
}
