/**
 * Weighted Jaccard (Ruzicka): the sum of the smaller weights by the sum of the larger ones, 0..1. The bags
 * {a,a,a,b} and {a,a,b,b,c} give 3/6. Both empty: null, there is nothing to compare.
 */
export function weightedJaccard(
	one: ReadonlyMap<string, number>,
	other: ReadonlyMap<string, number>
): number | null {
	let common = 0;
	let all = 0;
	for (const [key, weight] of one) {
		const match = other.get(key) ?? 0;
		common += Math.min(weight, match);
		all += Math.max(weight, match);
	}
	for (const [key, weight] of other) if (!one.has(key)) all += weight;
	return all > 0 ? common / all : null;
}

/** Each key with its weight. */
export function weigh(keys: readonly string[], weightOf: (key: string) => number): Map<string, number> {
	return new Map(keys.map((key) => [key, weightOf(key)]));
}
