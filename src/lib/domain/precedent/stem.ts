import { SAME_WORD } from './trade-words';

/** Words this short are left as they are: cutting them would join strangers ("gas", "gate"). */
const SHORTEST_TO_CUT = 4;

const VOWEL = /[aeiouy]/;

/**
 * The stem under which a word is kept and looked for: plural, past, present participle and noun in -ion fall
 * together ("estimates", "estimated", "estimating", "estimation" are all "estimat"). Lighter than Porter's
 * algorithm on purpose: it never takes off a second suffix, so that the terms of the trade stay apart
 * ("planned" is "plan", "planner" stays "planner"). Words with a digit, an underscore or a dot are names and
 * stay whole. Expects lower case.
 */
export function stem(word: string): string {
	const same = SAME_WORD.get(word);
	if (same !== undefined) return same;
	if (word.length < SHORTEST_TO_CUT || !/^[a-z]+$/.test(word)) return word;
	const cut = cutEnding(cutPlural(word));
	return SAME_WORD.get(cut) ?? cut;
}

function cutPlural(word: string): string {
	if (!word.endsWith('s') || /(?:ss|us|is)$/.test(word)) return word;
	if (word.endsWith('ies')) return word.length > 4 ? `${word.slice(0, -3)}y` : word.slice(0, -1);
	if (/(?:ch|sh|ss|x|zz)es$/.test(word)) return word.slice(0, -2);
	return word.slice(0, -1);
}

function cutEnding(word: string): string {
	if (word.endsWith('ying') || word.endsWith('ied'))
		return `${word.slice(0, word.endsWith('ied') ? -3 : -4)}y`;
	if (word.endsWith('ing')) return cutVerb(word, 3);
	if (word.endsWith('ed')) return cutVerb(word, 2);
	if (/[st]ion$/.test(word) && word.length > 6) return cutSilentE(word.slice(0, -3));
	if (word.endsWith('ly') && word.length > 5) return cutSilentE(word.slice(0, -2));
	return cutSilentE(word);
}

/** Takes the ending off where a word with a vowel is left: "spilling" is cut, "string" is not. */
function cutVerb(word: string, length: number): string {
	const rest = word.slice(0, -length);
	if (rest.length < 3 || !VOWEL.test(rest)) return word;
	const last = rest.at(-1) ?? '';
	const doubled = last === rest.at(-2) && !/[aeioulsz]/.test(last);
	return doubled ? rest.slice(0, -1) : cutSilentE(rest);
}

/** "cache" and "caching" meet at "cach". */
function cutSilentE(word: string): string {
	return word.length >= SHORTEST_TO_CUT && word.endsWith('e') && !word.endsWith('ee')
		? word.slice(0, -1)
		: word;
}
