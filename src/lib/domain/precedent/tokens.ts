import { stem } from './stem';
import { STOP_WORDS } from './stop-words';

/** One word of a text and where it stands in it. */
export interface Word {
	/** Lower case, accents folded. */
	text: string;
	start: number;
	end: number;
}

/** Letters, digits, `_` and `$`, held together by single dots: `yard_move.moved_at` is one name. */
const NAME = /[\p{L}\p{N}_$]+(?:\.[\p{L}_$][\p{L}\p{N}_$]*)*/gu;
/** A word of one piece, as nearly all are: nothing to fold but its case. */
const PLAIN = /^(?:[A-Za-z]?[a-z]*|[A-Z]+|\d+)$/;
/** What folding takes away: accents, and whatever else a compatibility form falls apart into (U+FC5E: a space). */
const NO_PART_OF_A_NAME = /[^\p{L}\p{N}_$.]/gu;
/** Where one word of a camelCase name ends. */
const HUMP = /(?<=[\p{Ll}\p{N}])(?=\p{Lu})/u;
const LETTER = /[\p{L}\p{N}]/u;
const UNDERSCORED = /[\p{L}\p{N}]_+[\p{L}\p{N}]/u;

function fold(text: string): string {
	return text.normalize('NFKD').replace(NO_PART_OF_A_NAME, '').toLowerCase();
}

/**
 * The words of a text in order. A name with underscores, dots or humps yields its parts
 * ("yard_move.movedAt" yields yard, move, moved, at); the whole is what `findNames` is for.
 */
export function findWords(text: string): Word[] {
	const words: Word[] = [];
	for (const match of text.matchAll(NAME)) {
		const { 0: name, index } = match;
		if (PLAIN.test(name)) words.push({ text: name.toLowerCase(), start: index, end: index + name.length });
		else pushParts(words, name, index);
	}
	return words;
}

function pushParts(words: Word[], name: string, index: number): void {
	let start = index;
	for (const piece of name.split(/([._$]+)/)) {
		for (const part of piece.split(HUMP)) {
			const text = fold(part);
			if (LETTER.test(text)) words.push({ text, start, end: start + part.length });
			start += part.length;
		}
	}
}

/** Names that are more than one word, whole: "yard_move.moved_at" yields itself, yard_move and moved_at. */
export function findNames(text: string): string[] {
	const names: string[] = [];
	for (const [name] of text.matchAll(NAME)) {
		if (PLAIN.test(name)) continue;
		const folded = fold(name);
		const pieces = folded.split('.');
		for (const piece of pieces) {
			if (UNDERSCORED.test(piece) || (pieces.length === 1 && piece !== '' && HUMP.test(name)))
				names.push(piece);
		}
		if (pieces.length > 1 && LETTER.test(folded)) names.push(folded);
	}
	return names;
}

/** The stems of a text in order, stop words left out. */
export function stemsOf(text: string): string[] {
	const stems: string[] = [];
	for (const word of findWords(text)) {
		if (!STOP_WORDS.has(word.text)) stems.push(stem(word.text));
	}
	return stems;
}

/**
 * Everything a text can be found under: its stems in order, then its names whole. The names stand behind, so
 * that a phrase finds the words of a name whether it was written with underscores or with spaces.
 */
export function termsOf(text: string): string[] {
	return [...stemsOf(text), ...findNames(text)];
}
