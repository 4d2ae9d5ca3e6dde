import type { Operator } from '$lib/domain/reading/operator';
import { walkOperators } from '$lib/domain/reading/operator';
import type { Trail } from '$lib/domain/reading/reading';
import { formatBytes, formatRows } from '$lib/domain/sizing/units';
import { formatRatio } from './figures';
import { nameOperator, overflowFigures } from './operator-words';

/** One step of a drift trail, ready to be drawn. */
export interface DrawnStep {
	path: string;
	/** "scan of invoice_line" */
	name: string;
	/** "state = ?"; null: nothing more is known. */
	note: string | null;
	ratio: number;
	/** "450,300 for 600" where the ratio changes, "still × 750" where it stays. */
	figures: string;
	/** What it wrote to disk: "8 batches, 55 MB on disk"; null: nothing. */
	overflow: string | null;
	/** Hatched: it overflowed. */
	over: boolean;
}

/** Two ratios that a reader would call the same. */
const SAME = 1.05;

/** The operators of a tree under their paths; none without a tree. */
export function operatorsByPath(root: Operator | null): Map<string, Operator> {
	if (root === null) return new Map();
	return new Map([...walkOperators(root)].map((operator) => [operator.path, operator]));
}

/** The steps of a trail with their operators' names and what each wrote to disk, in flow order. */
export function drawSteps(trail: Trail, operators: ReadonlyMap<string, Operator>): DrawnStep[] {
	let before: number | null = null;
	return trail.steps.map((step) => {
		const operator = operators.get(step.operator) ?? null;
		const words =
			operator === null ? { what: `operator ${step.operator}`, how: null } : nameOperator(operator);
		const overflow = operator === null ? null : overflowFigures(operator, formatBytes);
		const same = before !== null && step.ratio / before < SAME && before / step.ratio < SAME;
		before = step.ratio;
		return {
			path: step.operator,
			name: words.what,
			note: words.how,
			ratio: step.ratio,
			figures: same
				? `still ${formatRatio(step.ratio)}`
				: `${formatRows(step.actual)} for ${formatRows(step.expected)}`,
			overflow,
			over: step.operator === trail.overflow || overflow !== null
		};
	});
}

/** A sentence cut at the words to be set off, in their order of appearance. */
export function markWords(sentence: string, words: readonly string[]): { text: string; mark: boolean }[] {
	const parts: { text: string; mark: boolean }[] = [];
	let from = 0;
	while (from < sentence.length) {
		const found = words
			.filter((word) => word !== '')
			.map((word) => ({ word, at: sentence.indexOf(word, from) }))
			.filter((hit) => hit.at >= 0)
			.sort((a, b) => a.at - b.at || b.word.length - a.word.length)[0];
		if (found === undefined) break;
		if (found.at > from) parts.push({ text: sentence.slice(from, found.at), mark: false });
		parts.push({ text: found.word, mark: true });
		from = found.at + found.word.length;
	}
	if (from < sentence.length) parts.push({ text: sentence.slice(from), mark: false });
	return parts;
}
