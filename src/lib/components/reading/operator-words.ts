import type { Operator } from '$lib/domain/reading/operator';
import { phraseOperator } from '$lib/domain/reading/operator-phrase';

export { wordOf } from '$lib/domain/symptom/id-words';

/** An operator in words: what it is, and what tells it from others of its kind. */
export interface OperatorWords {
	/** "scan of invoice_line", "hash join" */
	what: string;
	/** "state = ?", "on invoice_no"; null: nothing more is known. */
	how: string | null;
}

/** Names an operator for the ledger and the figures beside it, in the words of the trail's sentence. */
export function nameOperator(operator: Operator): OperatorWords {
	const phrase = phraseOperator(operator);
	const kind = operator.kind.replaceAll('-', ' ');
	// "hash join on invoice_no": the phrase holds the condition, cut to what tells.
	if (phrase.startsWith(`${kind} `) && operator.relation === null)
		return { what: kind, how: phrase.slice(kind.length + 1) };
	const what =
		operator.relation === null || phrase.includes(operator.relation)
			? phrase
			: `${phrase} on ${operator.relation}`;
	const condition = operator.condition === null ? '' : trimBrackets(operator.condition);
	return { what, how: condition === '' || phrase.includes(condition) ? null : condition };
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
	// A hash join and the build below it are one table that overflows: the engine splits its figures between them.
	const build =
		operator.kind === 'hash-join' ? operator.children.find(({ kind }) => kind === 'hash-build') : undefined;
	const batches = operator.batches ?? build?.batches ?? null;
	const bytes = (operator.temporaryBytes ?? 0) + (build?.temporaryBytes ?? 0);
	const parts: string[] = [];
	if (batches !== null && batches > 1) parts.push(`${batches} batches`);
	if (bytes > 0) parts.push(`${formatBytes(bytes)} on disk`);
	return parts.length > 0 ? parts.join(', ') : null;
}
