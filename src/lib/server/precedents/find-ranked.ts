import { scoreTexts, SMALL_COLLECTION } from '$lib/domain/precedent/bm25';
import { chooseTerms, listTerms } from '$lib/domain/precedent/choose-terms';
import { ANY_EVIDENCE, featuresOf, rarityFrom } from '$lib/domain/precedent/features';
import type { Candidate, EvidenceProfile, RankedPrecedent, Rarity } from '$lib/domain/precedent/precedent';
import { NO_EVIDENCE, NOTHING_TOLD, profileOf } from '$lib/domain/precedent/profile';
import { rankPrecedents, type RankOptions } from '$lib/domain/precedent/rank';
import { termsOf } from '$lib/domain/precedent/tokens';
import { findConcepts } from '$lib/domain/precedent/trade-words';
import { anyOf } from '$lib/domain/search/match-expression';
import { LONGEST_TEXT } from '$lib/domain/search/index-text';
import * as store from './candidate-store';
import type { Asked } from './asked';
import { countsOf } from './term-counts';

/** Candidates that words and evidence each bring in: several times what is ever shown. */
const MOST_BY_WORDS = 150;
const MOST_BY_EVIDENCE = 150;
/** The sum of incidents that features may lead to; the rarest come first. */
const INCIDENTS_BUDGET = 40_000;

/** Ranked precedents with what is needed to describe them. */
export interface Found {
	ranked: RankedPrecedent[];
	rows: ReadonlyMap<number, store.CandidateRow>;
	/** The terms asked for, rarest first. */
	terms: string[];
	rarity: Rarity;
}

/**
 * Finds the candidates for what is asked (those with the best words, and those that share the rarest evidence)
 * and ranks them. Weights other than the usual ones are for the bench.
 */
export async function findRanked(
	asked: Asked,
	limit: number,
	weights?: RankOptions['weights']
): Promise<Found> {
	const [words, byEvidence] = await Promise.all([findByWords(asked), findByEvidence(asked)]);
	const numbers = new Set([...words.bm25.keys(), ...byEvidence]);
	if (asked.number !== null) numbers.delete(asked.number);
	const rows = await store.readCandidates([...numbers]);
	const rarity = await weighFeatures([asked.profile, ...rows.map((row) => row.profile ?? NO_EVIDENCE)]);
	const candidates = rows.map((row) => toCandidate(row, words.bm25.get(row.number) ?? null));
	const ranked = rankPrecedents(
		{ profile: asked.profile, bestBm25: words.weight },
		candidates,
		rarity,
		weights === undefined ? { limit } : { limit, weights }
	);
	return {
		ranked,
		rows: new Map(rows.map((row) => [row.number, row])),
		terms: words.terms,
		rarity
	};
}

async function findByWords({
	number,
	text
}: Asked): Promise<{ terms: string[]; weight: number; bm25: ReadonlyMap<number, number> }> {
	const terms = listTerms(text.slice(0, LONGEST_TEXT));
	const counts = await countsOf(terms);
	// A logged incident holds all of its own terms; they are worth asking for where another one does too.
	const own = number === null ? 0 : 1;
	const chosen = chooseTerms(terms, (term) => counts.of(term) - own, counts.documents);
	return { ...chosen, bm25: await scoreWords(chosen.asked, counts.documents) };
}

/** BM25 by incident, of the best ones. */
async function scoreWords(asked: readonly string[], documents: number): Promise<ReadonlyMap<number, number>> {
	if (documents <= SMALL_COLLECTION) return scoreTexts(asked, await readTerms());
	const expression = anyOf(asked);
	const matches = expression === null ? [] : await store.matchWords(expression, MOST_BY_WORDS);
	return new Map(matches.map(({ number, bm25 }) => [number, bm25]));
}

/** The terms of every incident of a small collection. */
async function readTerms(): Promise<Map<number, string[]>> {
	const texts = await store.readTexts(await store.listNumbers());
	return new Map(
		[...texts].map(([number, text]) => [
			number,
			[...termsOf(text), ...findConcepts(text).map((idea) => idea.term)]
		])
	);
}

/** Numbers of the incidents that share the most, and the rarest, of the evidence. */
async function findByEvidence({ profile }: Asked): Promise<number[]> {
	const features = featuresOf(profile);
	const counts = await store.countFeatures([ANY_EVIDENCE, ...features]);
	const rarity = rarityFrom(counts, counts.get(ANY_EVIDENCE) ?? 0);
	const known = features
		.filter((feature) => feature !== ANY_EVIDENCE && counts.has(feature))
		.map((feature) => ({ feature, weight: rarity(feature), incidents: counts.get(feature) ?? 0 }))
		.sort((one, other) => one.incidents - other.incidents);
	let led = 0;
	const wanted = known.filter(
		({ incidents }, index) => (led += incidents) <= INCIDENTS_BUDGET || index === 0
	);
	return store.matchFeatures(wanted, MOST_BY_EVIDENCE);
}

/** How rare each feature is that any of the profiles has. */
async function weighFeatures(profiles: readonly EvidenceProfile[]): Promise<Rarity> {
	const features = new Set([ANY_EVIDENCE, ...profiles.flatMap(featuresOf)]);
	const counts = await store.countFeatures([...features]);
	return rarityFrom(counts, counts.get(ANY_EVIDENCE) ?? 0);
}

function toCandidate(row: store.CandidateRow, bm25: number | null): Candidate {
	const profile = profileOf(row, row.profile ?? NO_EVIDENCE, row.profile ?? NOTHING_TOLD);
	const hasOutcome =
		(row.state === 'resolved' || row.state === 'reviewed') && (row.resolution ?? '').trim() !== '';
	return { number: row.number, profile, bm25, hasOutcome, verdict: null };
}
