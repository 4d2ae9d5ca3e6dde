import { stem } from '../precedent/stem';
import { findWords, type Word } from '../precedent/tokens';
import type { SearchHit } from './search-hit';

/** Characters shown of a text, and how many of them stand before the first word met. */
const LENGTH = 160;
const LEAD = 40;

/** Whether a word of the text is one that was asked for. */
export type WordTest = (word: Word) => boolean;

/** Tests words against stems, and against beginnings (the word still being typed). */
export function matchesAny(stems: ReadonlySet<string>, beginnings: readonly string[]): WordTest {
	const known = new Map<string, boolean>();
	return ({ text }) => {
		const seen = known.get(text);
		if (seen !== undefined) return seen;
		const isMet = stems.has(stem(text)) || beginnings.some((beginning) => text.startsWith(beginning));
		known.set(text, isMet);
		return isMet;
	};
}

/**
 * The part of a text with most of the words asked for, cut at words, what was met marked. Plain text: Markdown
 * signs are left as they stand, nothing is ever HTML. A text without any of the words gives its beginning;
 * an empty one nothing.
 */
export function cutSnippet(text: string, isMet: WordTest): SearchHit['snippet'] {
	const flat = text.replaceAll(/\s+/g, ' ').trim();
	if (flat === '') return [];
	const met = findWords(flat).filter(isMet);
	const start = chooseStart(flat, met);
	const end = cutEnd(flat, start + LENGTH);
	const parts: SearchHit['snippet'] = [];
	const push = (piece: string, mark: boolean) => {
		if (piece !== '') parts.push({ text: piece, mark });
	};
	let at = start;
	for (const word of met) {
		if (word.start < at || word.end > end) continue;
		push((at === start && start > 0 ? '… ' : '') + flat.slice(at, word.start), false);
		push(flat.slice(word.start, word.end), true);
		at = word.end;
	}
	push(
		(at === start && start > 0 ? '… ' : '') + flat.slice(at, end) + (end < flat.length ? ' …' : ''),
		false
	);
	return parts;
}

/** Begins a little before the window that holds most different words met. */
function chooseStart(text: string, met: readonly Word[]): number {
	let best = 0;
	let most = 0;
	for (const [index, first] of met.entries()) {
		const seen = new Set<string>();
		for (let i = index; i < met.length; i++) {
			const word = met[i];
			if (word === undefined || word.end > first.start + LENGTH - LEAD) break;
			seen.add(word.text);
		}
		if (seen.size > most) {
			most = seen.size;
			best = first.start;
		}
	}
	if (best <= LEAD) return 0;
	const space = text.indexOf(' ', best - LEAD);
	return space === -1 || space >= best ? best : space + 1;
}

function cutEnd(text: string, end: number): number {
	if (end >= text.length) return text.length;
	const space = text.lastIndexOf(' ', end);
	return space > end - LEAD ? space : end;
}
