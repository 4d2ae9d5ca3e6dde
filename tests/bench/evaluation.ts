/** Measures of a ranked list against graded truth, and their intervals. */

/**
 * DCG over the first k: gain / log2(rank + 1), gain = grade, rank from 1. (The exponential gain and the
 * variant of 2002 without a discount for rank 1 are others.)
 */
export function dcg(grades: readonly number[], k: number): number {
	return grades.slice(0, k).reduce((sum, grade, index) => sum + grade / Math.log2(index + 2), 0);
}

/** DCG by that of the ideal order of all judged documents; null: nothing is relevant. */
export function ndcg(ranked: readonly number[], judged: readonly number[], k: number): number | null {
	const ideal = dcg(
		[...judged].sort((one, other) => other - one),
		k
	);
	return ideal > 0 ? dcg(ranked, k) / ideal : null;
}

/** Relevant ones in the first k by all relevant ones; null: there is none. */
export function recallAt(ranked: readonly boolean[], relevant: number, k: number): number | null {
	return relevant > 0 ? ranked.slice(0, k).filter(Boolean).length / relevant : null;
}

export function mean(values: readonly number[]): number {
	return values.length === 0 ? 0 : values.reduce((sum, value) => sum + value, 0) / values.length;
}

const RESAMPLES = 2000;

/** 95 % percentile bootstrap of the mean: queries drawn with replacement, from a seed so that runs agree. */
export function bootstrapInterval(values: readonly number[]): [number, number] {
	if (values.length === 0) return [0, 0];
	const random = seededRandom(20_261_201);
	const means = Array.from({ length: RESAMPLES }, () =>
		mean(values.map(() => values[Math.floor(random() * values.length)] ?? 0))
	).sort((one, other) => one - other);
	return [means[Math.floor(RESAMPLES * 0.025)] ?? 0, means[Math.floor(RESAMPLES * 0.975)] ?? 0];
}

/** mulberry32: small, even, the same everywhere. */
export function seededRandom(seed: number): () => number {
	let state = seed;
	return () => {
		state = (state + 0x6d2b79f5) | 0;
		let mixed = Math.imul(state ^ (state >>> 15), 1 | state);
		mixed = (mixed + Math.imul(mixed ^ (mixed >>> 7), 61 | mixed)) ^ mixed;
		return ((mixed ^ (mixed >>> 14)) >>> 0) / 4_294_967_296;
	};
}
