import { plainIdf, positiveIdf, SMALL_COLLECTION } from './bm25';
import { findConcepts } from './trade-words';
import { stemsOf, findNames } from './tokens';
import { TRADE_STEMS } from './trade-stems';

/** Of a long text, this many of its rarest words are asked for. Useful 15..40; more costs time and brings chatter. */
export const RAREST_WORDS = 25;
/** Words of the trade that are asked for beside them, however common they are here. */
export const MOST_TRADE_WORDS = 25;
/**
 * The sum of documents that the terms may lead to. Rare terms come first, so it only ever leaves out the
 * commonest ones of a large collection, which say least and cost most.
 */
export const DOCUMENTS_BUDGET = 60_000;
/** In a large collection a word in more than this part of all documents tells nothing apart; ideas are exempt. */
const TOO_COMMON = 0.5;

/** How many times an idea is asked for: it counts that many times in BM25. Useful 1..2. */
const IDEAS_COUNT = 2;

/** The terms to ask for, rarest first, with what they are worth. */
export interface ChosenTerms {
	/** Each once. */
	terms: string[];
	/** As they are asked for: an idea as often as it counts. */
	asked: string[];
	/** Sum of the terms' inverse document frequencies: what BM25 of the best text comes near to. */
	weight: number;
}

/** Every term of a text that may be asked for, each once: their document counts are what `chooseTerms` needs. */
export function listTerms(text: string): string[] {
	const words = [...stemsOf(text), ...findNames(text)].filter((term) => !/^\d/.test(term) && term.length > 1);
	const ideas = findConcepts(text).map((concept) => concept.term);
	return [...new Set([...words, ...ideas])];
}

/**
 * Chooses of a text's terms those worth asking for: the rarest words that some document has, the words of the
 * trade, and the ideas it speaks of. `documentsOf` says how many of `documents` have a term.
 */
export function chooseTerms(
	terms: readonly string[],
	documentsOf: (term: string) => number,
	documents: number
): ChosenTerms {
	const known = terms
		.map((term) => ({ term, holders: documentsOf(term) }))
		.filter(({ holders }) => holders > 0)
		.sort((one, other) => one.holders - other.holders);
	const isSmall = documents <= SMALL_COLLECTION;
	const words = known.filter(
		({ term, holders }) => !isIdea(term) && (isSmall || holders <= documents * TOO_COMMON)
	);
	const rare = words.slice(0, RAREST_WORDS);
	const trade = words.slice(RAREST_WORDS).filter(({ term }) => TRADE_STEMS.has(term));
	const wanted = [
		...rare,
		...trade.slice(0, MOST_TRADE_WORDS),
		...known.filter(({ term }) => isIdea(term))
	].sort((one, other) => one.holders - other.holders);
	const chosen: ChosenTerms = { terms: [], asked: [], weight: 0 };
	let led = 0;
	for (const { term, holders } of wanted) {
		led += holders;
		if (led > DOCUMENTS_BUDGET && chosen.terms.length > 0) break;
		const times = isIdea(term) ? IDEAS_COUNT : 1;
		chosen.terms.push(term);
		chosen.asked.push(...Array<string>(times).fill(term));
		const idf = isSmall ? positiveIdf(documents, holders) : Math.max(0, plainIdf(documents, holders));
		chosen.weight += times * idf;
	}
	return chosen;
}

function isIdea(term: string): boolean {
	return term.startsWith('~');
}
