/**
 * BM25 (Robertson and Zaragoza, "The Probabilistic Relevance Framework: BM25 and Beyond", 2009) with the
 * parameters that SQLite's full-text search has too. Large collections are ranked there; this one is for small
 * ones, where the plain idf turns negative for words that more than half of the texts hold.
 */

/** How much the fifth occurrence still adds to the fourth. Higher: more. Useful 1.2..2. */
const K1 = 1.2;
/** How far a long text is held against it: 0 not at all, 1 in full proportion. */
const B = 0.75;

/** Up to this many incidents the words are ranked here. */
export const SMALL_COLLECTION = 100;

/** ln((N - n + 0.5) / (n + 0.5)): negative for a term that more than half of the documents hold. */
export function plainIdf(documents: number, holders: number): number {
	return Math.log((documents - holders + 0.5) / (holders + 0.5));
}

/** ln(1 + (N - n + 0.5) / (n + 0.5)): the same, kept above 0. */
export function positiveIdf(documents: number, holders: number): number {
	return Math.log(1 + (documents - holders + 0.5) / (holders + 0.5));
}

/** What one term adds: `occurrences` in a text whose length is `lengthRatio` times the average. */
export function weighTerm(idf: number, occurrences: number, lengthRatio: number): number {
	return (idf * occurrences * (K1 + 1)) / (occurrences + K1 * (1 - B + B * lengthRatio));
}

/** BM25 of each text for the terms asked for, a term listed twice counting twice; texts without any are left out. */
export function scoreTexts(
	asked: readonly string[],
	texts: ReadonlyMap<number, readonly string[]>
): Map<number, number> {
	const average = [...texts.values()].reduce((sum, terms) => sum + terms.length, 0) / Math.max(texts.size, 1);
	const counted = new Map([...texts].map(([number, terms]) => [number, countTerms(terms)]));
	const holders = new Map(
		[...new Set(asked)].map((term) => [
			term,
			[...counted.values()].filter((counts) => counts.has(term)).length
		])
	);
	const scores = new Map<number, number>();
	for (const [number, counts] of counted) {
		const lengthRatio = (texts.get(number)?.length ?? 0) / Math.max(average, 1);
		let score = 0;
		for (const term of asked) {
			const occurrences = counts.get(term) ?? 0;
			if (occurrences > 0)
				score += weighTerm(positiveIdf(texts.size, holders.get(term) ?? 0), occurrences, lengthRatio);
		}
		if (score > 0) scores.set(number, score);
	}
	return scores;
}

function countTerms(terms: readonly string[]): Map<string, number> {
	const counts = new Map<string, number>();
	for (const term of terms) counts.set(term, (counts.get(term) ?? 0) + 1);
	return counts;
}
