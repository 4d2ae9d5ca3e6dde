import type { Operator, OperatorKind } from '$lib/domain/reading/operator';

/** An operator in words: what it is, and what tells it from others of its kind. */
export interface OperatorWords {
	/** "scan of invoice_line", "hash join" */
	what: string;
	/** "state = ?", "on invoice_no"; null: nothing more is known. */
	how: string | null;
}

/** Kinds that read something: "scan of …". The others stand alone and take their condition with "on" or "by". */
const READS: Partial<Record<OperatorKind, string>> = {
	'seq-scan': 'scan of',
	'index-scan': 'index scan of',
	'index-only-scan': 'index-only scan of',
	'bitmap-scan': 'bitmap scan of',
	'bitmap-index': 'bitmap index scan of',
	lookup: 'lookup in',
	'cte-scan': 'scan of',
	'function-scan': 'rows of',
	modify: 'change of'
};
const ON: readonly OperatorKind[] = ['hash-join', 'merge-join', 'nested-loop'];
const BY: readonly OperatorKind[] = [
	'sort',
	'incremental-sort',
	'hash-aggregate',
	'group-aggregate',
	'window',
	'unique'
];

/** Names an operator for the trail, the ledger and the figures beside it. */
export function nameOperator(operator: Operator): OperatorWords {
	const reads = READS[operator.kind];
	const plain = operator.kind === 'other' ? operator.name.toLowerCase() : operator.kind.replaceAll('-', ' ');
	const what =
		reads !== undefined && operator.relation !== null
			? `${reads} ${operator.relation}`
			: operator.relation !== null
				? `${plain} ${operator.relation}`
				: reads !== undefined
					? operator.name.toLowerCase()
					: plain;
	if (operator.condition === null || operator.condition === '') return { what, how: null };
	const condition = trimBrackets(operator.condition);
	if (ON.includes(operator.kind)) return { what, how: `on ${condition}` };
	if (BY.includes(operator.kind)) return { what, how: `by ${condition}` };
	return { what, how: condition };
}

/** Takes off a pair of brackets that embraces the whole condition: "(a = b)" → "a = b". */
function trimBrackets(condition: string): string {
	if (!condition.startsWith('(') || !condition.endsWith(')')) return condition;
	let depth = 0;
	for (let at = 0; at < condition.length - 1; at++) {
		if (condition[at] === '(') depth++;
		else if (condition[at] === ')') depth--;
		if (depth === 0) return condition;
	}
	return condition.slice(1, -1);
}

/** What an operator did on disk: "8 batches, 55 MB"; null: nothing that the evidence shows. */
export function overflowFigures(operator: Operator, formatBytes: (bytes: number) => string): string | null {
	const parts: string[] = [];
	if (operator.batches !== null && operator.batches > 1) parts.push(`${operator.batches} batches`);
	if (operator.temporaryBytes !== null && operator.temporaryBytes > 0)
		parts.push(`${formatBytes(operator.temporaryBytes)} on disk`);
	return parts.length > 0 ? parts.join(', ') : null;
}

/** Ids of symptoms and causes are words: "hash-spill" → "hash spill". */
export function wordOf(id: string): string {
	return id.replaceAll('-', ' ').replace(/\bjit\b/, 'JIT');
}
