/**
 * Reciprocal rank fusion (Cormack, Clarke and Buettcher, SIGIR 2009): each list adds weight / (60 + rank) to
 * what it holds, rank from 1. What a list doesn't hold gets nothing from it. Ranks 1 and 3 of two lists give
 * 1/61 + 1/63 = 0.03227.
 */
export function fuseRankings(
	lists: readonly { ids: readonly string[]; weight: number }[]
): { id: string; score: number }[] {
	const scores = new Map<string, number>();
	for (const { ids, weight } of lists) {
		for (const [index, id] of ids.entries()) {
			scores.set(id, (scores.get(id) ?? 0) + weight / (RANK_OFFSET + index + 1));
		}
	}
	return [...scores].map(([id, score]) => ({ id, score })).sort((one, other) => other.score - one.score);
}

/** The paper's k. Higher: places far down the lists count nearly as much as the first. Useful 10..100. */
const RANK_OFFSET = 60;

/** The score of what stands first in lists of these weights: what scores are divided by to lie in 0..1. */
export function bestFusedScore(weights: readonly number[]): number {
	return weights.reduce((sum, weight) => sum + weight, 0) / (RANK_OFFSET + 1);
}
