import { FULL_WORDS_SHARE } from '../weights';

/**
 * How alike two texts are, 0..1, from the BM25 score of one for the words of the other. BM25 has no top of its
 * own; it is held against what the question's own text would score, of which a good match reaches a part.
 * Null: no words were asked.
 */
export function compareWords(bm25: number | null, bestBm25: number): number | null {
	if (bestBm25 <= 0) return null;
	return Math.min(1, (bm25 ?? 0) / (bestBm25 * FULL_WORDS_SHARE));
}
