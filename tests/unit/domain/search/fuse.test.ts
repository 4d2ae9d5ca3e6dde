import { describe, expect, it } from 'vitest';
import { bestFusedScore, fuseRankings } from '$lib/domain/search/fuse';

describe('fuseRankings', () => {
	it('fuses nothing into nothing', () => {
		expect(fuseRankings([])).toEqual([]);
	});

	it('gives ranks 1 and 3 the sum 1/61 + 1/63 = 0.03227 (Cormack, Clarke, Buettcher, SIGIR 2009; k = 60)', () => {
		const fused = fuseRankings([
			{ ids: ['a', 'b'], weight: 1 },
			{ ids: ['c', 'd', 'a'], weight: 1 }
		]);
		expect(fused[0]).toEqual({ id: 'a', score: 1 / 61 + 1 / 63 });
		expect(fused[0]?.score).toBeCloseTo(0.03227, 5);
	});

	it('puts what two lists hold in the middle before what one holds at its top', () => {
		const fused = fuseRankings([
			{ ids: ['top', 'both'], weight: 1 },
			{ ids: ['other', 'both'], weight: 1 }
		]);
		expect(fused[0]?.id).toBe('both');
	});

	it('reaches its best score in what stands first in every list', () => {
		const [first] = fuseRankings([
			{ ids: ['a'], weight: 1 },
			{ ids: ['a'], weight: 0.6 }
		]);
		expect(first?.score).toBeCloseTo(bestFusedScore([1, 0.6]), 12);
	});
});
