import { database, type Database } from '$lib/server/db/connection';
import * as store from './candidate-store';

/** Terms whose counts are kept; the common ones, which cost most to count, come again and again. */
const MOST_KEPT = 20_000;
/** Counts are taken anew once the collection has grown or shrunk by this part, or by this many. */
const DRIFT_PART = 0.02;
const DRIFT_AT_LEAST = 20;

interface Kept {
	documents: number;
	counts: Map<string, number>;
}

const kept = new WeakMap<Database, Kept>();

/** In how many incidents terms occur, and how many incidents there are. */
export interface TermCounts {
	documents: number;
	/** 0: in none. */
	of(term: string): number;
}

/**
 * Counts the terms. Counting a common term reads its whole list of documents, so counts are kept while the
 * collection stays about as large as it was; choosing terms needs no exact figure. In a small collection
 * they are always exact.
 */
export async function countsOf(terms: readonly string[]): Promise<TermCounts> {
	const documents = await store.countIncidents();
	const known = keptFor(documents);
	const missing = terms.filter((term) => !known.counts.has(term));
	const counted = await store.countTerms(missing);
	if (known.counts.size + missing.length > MOST_KEPT) known.counts.clear();
	for (const term of missing) known.counts.set(term, counted.get(term) ?? 0);
	const answer = new Map(terms.map((term) => [term, known.counts.get(term) ?? counted.get(term) ?? 0]));
	return { documents, of: (term) => answer.get(term) ?? 0 };
}

function keptFor(documents: number): Kept {
	const open = database();
	const known = kept.get(open);
	const isSmall = documents < DRIFT_AT_LEAST / DRIFT_PART;
	if (known !== undefined && !isSmall && Math.abs(documents - known.documents) <= documents * DRIFT_PART) {
		return known;
	}
	const fresh: Kept = { documents, counts: new Map() };
	kept.set(open, fresh);
	return fresh;
}
