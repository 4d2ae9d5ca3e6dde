/**
 * The published cost formulas that hold for any engine: the bound given where an engine's own rule is not public.
 */

/** Passes of an external merge sort of N pages with B buffers: 1 + ceil(log_{B-1}(ceil(N/B))) (Ramakrishnan/Gehrke, ch. 13). */
export function externalSortPasses(pages: number, buffers: number): number {
	let runs = Math.ceil(pages / buffers);
	let passes = 1;
	while (runs > 1) {
		runs = Math.ceil(runs / (buffers - 1));
		passes++;
	}
	return passes;
}

/** Page reads and writes of that sort: 2N for each pass. */
export function externalSortIos(pages: number, buffers: number): number {
	return 2 * pages * externalSortPasses(pages, buffers);
}

/** Page reads and writes of a partitioned (GRACE) hash join with L levels: (2L + 1)(M + N); 3(M + N) for one level. */
export function partitionedHashIos(buildPages: number, probePages: number, levels = 1): number {
	return (2 * levels + 1) * (buildPages + probePages);
}

/** Page reads and writes of a hybrid hash join that keeps the share q of the build side in memory: 3(M + N) - 2q(M + N). */
export function hybridHashIos(buildPages: number, probePages: number, keptShare: number): number {
	return (3 - 2 * keptShare) * (buildPages + probePages);
}

/** Fudge factor for what a hash table needs above its rows (1.2 in DeWitt et al. 1984, 1.4 in Shapiro 1986: the larger). */
export const HASH_FUDGE = 1.4;
