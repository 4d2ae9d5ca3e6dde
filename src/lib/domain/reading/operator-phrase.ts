import type { Operator, OperatorKind } from './operator';

/** What a phrase is made of: an operator of a plan or of a reading, which no longer carries the facts. */
export interface PhrasedOperator extends Pick<
	Operator,
	'kind' | 'name' | 'relation' | 'alias' | 'condition'
> {
	children: readonly PhrasedOperator[];
	facts?: { indexName: string | null };
}

/** Kinds that read something: "scan of invoice_line". */
const READS: Partial<Record<OperatorKind, string>> = {
	'seq-scan': 'scan of',
	'index-scan': 'index scan of',
	'index-only-scan': 'index-only scan of',
	'bitmap-scan': 'bitmap scan of',
	lookup: 'lookup in',
	'cte-scan': 'scan of',
	'function-scan': 'rows of',
	modify: 'change of'
};
const JOINS: readonly OperatorKind[] = ['hash-join', 'merge-join', 'nested-loop'];

/** Longer conditions would drown the sentence that they stand in. */
const LONGEST_CONDITION = 60;

/** An operator in a few words for a sentence: "scan of invoice_line", "hash join on invoice_no", "sort by currency, charge_code". */
export function phraseOperator(operator: PhrasedOperator): string {
	const reads = READS[operator.kind];
	if (reads !== undefined && operator.relation !== null) return `${reads} ${operator.relation}`;
	const indexName = operator.facts?.indexName ?? null;
	if (operator.kind === 'bitmap-index' && indexName !== null) return `bitmap scan of index ${indexName}`;
	if (operator.kind === 'subquery' && operator.alias !== null) return `subquery ${operator.alias}`;
	const [input] = operator.children;
	if (operator.kind === 'materialize' && input !== undefined) return `stored ${phraseOperator(input)}`;
	const what = operator.kind === 'other' ? operator.name.toLowerCase() : operator.kind.replaceAll('-', ' ');
	const condition = shortCondition(operator);
	if (condition === null) return what;
	return `${what} ${JOINS.includes(operator.kind) ? 'on' : 'by'} ${condition}`;
}

function shortCondition(operator: PhrasedOperator): string | null {
	const { kind, condition } = operator;
	if (condition === null || condition === '') return null;
	if (JOINS.includes(kind)) return sharedColumn(condition) ?? shorten(withoutBrackets(condition));
	if (
		kind === 'sort' ||
		kind === 'incremental-sort' ||
		kind === 'hash-aggregate' ||
		kind === 'group-aggregate'
	)
		return shorten(condition);
	return null;
}

/** "(i.invoice_no = l.invoice_no)" → "invoice_no", where both sides carry the same name. */
function sharedColumn(condition: string): string | null {
	const match = /^\((?:"?[\w$]+"?\.)?("?[\w$]+"?) = (?:"?[\w$]+"?\.)?("?[\w$]+"?)\)$/.exec(condition);
	return match !== null && match[1] === match[2] ? (match[1] ?? null) : null;
}

function withoutBrackets(condition: string): string {
	const inner = /^\(([^()]*)\)$/.exec(condition);
	return inner?.[1] ?? condition;
}

function shorten(text: string): string {
	return text.length <= LONGEST_CONDITION ? text : `${text.slice(0, LONGEST_CONDITION - 1).trimEnd()}…`;
}
