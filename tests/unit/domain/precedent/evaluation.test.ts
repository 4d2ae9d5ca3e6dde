import { describe, expect, it } from 'vitest';
import { bootstrapInterval, dcg, mean, ndcg, recallAt } from '../../../bench/evaluation';

describe('ndcg', () => {
	// The well-known example of gains 3,2,3,0,1,2 with discount log2(rank + 1); recalculated.
	const gains = [3, 2, 3, 0, 1, 2];

	it('has no value where nothing is relevant', () => {
		expect(ndcg([0, 0], [0, 0], 10)).toBeNull();
	});

	it('gives DCG 6.861 and nDCG 0.961 against the ideal order of the six', () => {
		expect(dcg(gains, 6)).toBeCloseTo(6.861, 3);
		expect(ndcg(gains, gains, 6)).toBeCloseTo(0.961, 3);
	});

	it('gives 0.785 when two more judged documents, 3 and 2, were not found', () => {
		expect(ndcg(gains, [...gains, 3, 2], 6)).toBeCloseTo(0.785, 3);
	});
});

describe('recallAt', () => {
	it('has no value where nothing is relevant', () => {
		expect(recallAt([false], 0, 5)).toBeNull();
	});

	it('is the relevant ones in the first k by all relevant ones', () => {
		expect(recallAt([true, false, false, true, false, true], 4, 5)).toBe(0.5);
	});
});

describe('bootstrapInterval', () => {
	it('encloses the mean, and agrees with itself from run to run', () => {
		const values = Array.from({ length: 60 }, (_, i) => (i % 7) / 6);
		const [low, high] = bootstrapInterval(values);
		expect(low).toBeLessThan(mean(values));
		expect(high).toBeGreaterThan(mean(values));
		expect(bootstrapInterval(values)).toEqual([low, high]);
	});

	it('is as narrow as a point where all are the same', () => {
		expect(bootstrapInterval([0.5, 0.5, 0.5])).toEqual([0.5, 0.5]);
	});
});
