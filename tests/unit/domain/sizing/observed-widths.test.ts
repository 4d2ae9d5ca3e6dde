import { describe, expect, test } from 'vitest';
import { postgresLayout } from '$lib/domain/sizing/layout';
import { observeHashWidth, observeSortedBytes, type HashEvidence } from '$lib/domain/sizing/observed-widths';

const pg15 = postgresLayout(15);

/** A hash table of 15.18 that grew from 1 to 8 batches: 450,300 rows, planned width 22, real data just under 24 bytes. */
const grown: HashEvidence = {
	rows: 450300,
	batches: 8,
	plannedBatches: 1,
	buckets: 262144,
	peakKb: 8182,
	writtenBlocks: 1800,
	limitKb: 8192
};

describe('observeHashWidth', () => {
	test('finds how often the batches had doubled when the table was complete', () => {
		// With 4 batches the width is 23.7, which fills 8 MB just so; with 8 it would be 17.4, which 4 batches would have held.
		expect(observeHashWidth(pg15, grown)).toBeCloseTo(23.7, 1);
	});

	test('finds the real width where the planner had only a guess', () => {
		// A function's text column: planned width 32, real 12. 300,000 rows, 4 batches, 878 blocks, 6 MB.
		const guessed = {
			rows: 300000,
			batches: 4,
			plannedBatches: 1,
			buckets: 131072,
			peakKb: 5121,
			writtenBlocks: 878,
			limitKb: 6144
		};
		expect(observeHashWidth(pg15, guessed)).toBeCloseTo(12, 0);
	});

	test('agrees with the planned width where batches were planned and rows spread evenly', () => {
		// 300,000 rows of width 12 in 8 batches: 1,149 blocks, peak 2,790 kB.
		const planned = {
			rows: 300000,
			batches: 8,
			plannedBatches: 8,
			buckets: 131072,
			peakKb: 2790,
			writtenBlocks: 1149,
			limitKb: 4096
		};
		expect(observeHashWidth(pg15, planned)).toBeCloseTo(15.9, 0);
	});

	test('takes nothing from a skewed table', () => {
		const skewed = {
			rows: 250000,
			batches: 4096,
			plannedBatches: 4,
			buckets: 131072,
			peakKb: 14497,
			writtenBlocks: 1459,
			limitKb: 8192
		};
		expect(observeHashWidth(pg15, skewed)).toBeNull();
	});

	test('takes nothing without a limit, without files and without batches', () => {
		expect(observeHashWidth(pg15, { ...grown, limitKb: null })).toBeNull();
		expect(observeHashWidth(pg15, { ...grown, writtenBlocks: 0 })).toBeNull();
		expect(observeHashWidth(pg15, { ...grown, batches: 1 })).toBeNull();
	});
});

describe('observeSortedBytes', () => {
	test('gives the bytes of an average row', () => {
		// 200,000 rows of 69 bytes on tape: 15.18 printed 13,512 to 13,560 kB.
		expect(observeSortedBytes(13512, 200000)).toBeCloseTo(69, 0);
	});

	test('gives nothing without rows', () => {
		expect(observeSortedBytes(13512, 0)).toBeNull();
	});
});
