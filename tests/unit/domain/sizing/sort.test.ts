import { describe, expect, test } from 'vitest';
import { postgresLayout } from '$lib/domain/sizing/layout';
import {
	mergeOrder,
	sortChunkBytes,
	sortDiskBytes,
	sortNeededKb,
	sortPasses,
	sortPrintedKb,
	tupleBytesFromDisk
} from '$lib/domain/sizing/sort';

const pg15 = postgresLayout(15);
/** 200,000 rows whose tuples take 75 bytes, as in the runs of 15.18. */
const run = { rows: 200000, widthBytes: 59, bound: null };

describe('sortPrintedKb', () => {
	test('reproduces what 15.18 printed for a quicksort', () => {
		// 200,000 × (80 + 24) + 24 × 262,144 = 26,457 kB, printed "Memory: 26457kB".
		expect(Math.ceil(sortPrintedKb(pg15, run))).toBe(26457);
	});
});

describe('sortDiskBytes', () => {
	test('lies just below what 15.18 printed as disk (block trailers aside)', () => {
		// 200,000 × 69 bytes = 13,477 kB; printed 13,512 to 13,560 kB.
		expect(Math.ceil(sortDiskBytes(pg15, 200000, 59) / 1024)).toBe(13477);
	});

	test('is about half of what the same rows need in memory', () => {
		expect(sortNeededKb(pg15, run) / (sortDiskBytes(pg15, 200000, 59) / 1024)).toBeGreaterThan(1.8);
	});

	test('gives the tuple back', () => {
		expect(tupleBytesFromDisk(sortDiskBytes(pg15, 1, 59))).toBe(75);
	});
});

describe('sortNeededKb', () => {
	// Bisected on 15.18: [rows, width, still spills at, smallest sufficient work_mem].
	test.each([
		[450300, 14, 34816, 35328],
		[479417, 10, 37120, 37760],
		[500000, 20, 42240, 43008],
		[55503, 23, 4736, 4800],
		[450000, 60, 55296, 56320],
		[119855, 12, 9344, 9472],
		[177752, 14, 13824, 14080]
	])('finds the edge that bisection found for %d rows of %d bytes', (rows, widthBytes, spillsAt, enough) => {
		const kb = sortNeededKb(pg15, { rows, widthBytes, bound: null });
		expect(kb).toBeGreaterThan(spillsAt);
		expect(kb).toBeLessThanOrEqual(enough);
	});

	test('pays for power-of-two chunks under a limit', () => {
		// 420,000 rows of t_len 43 under LIMIT 500 OFFSET 300000: 42,496 kB spills, 43,008 kB does not.
		const kb = sortNeededKb(pg15, { rows: 420000, widthBytes: 27, bound: 300500 });
		expect(kb).toBeGreaterThan(42496);
		expect(kb).toBeLessThanOrEqual(43008);
	});

	test('never holds more than twice the bound', () => {
		expect(sortNeededKb(pg15, { rows: 1e6, widthBytes: 27, bound: 10 })).toBeLessThan(4);
	});

	test('pays nothing for chunk headers from 17 on', () => {
		expect(sortChunkBytes(postgresLayout(17), 75, false)).toBe(80);
		expect(sortChunkBytes(postgresLayout(16), 75, false)).toBe(88);
		expect(sortChunkBytes(postgresLayout(14), 75, false)).toBe(16 + 128);
	});
});

describe('sortPasses', () => {
	// Temporary bytes of three runs on 15.18: 13,576 kB (4 MB), 27,232 kB (1 MB), 58,176 kB (64 kB); one pass writes about 13,540.
	test.each([
		[4096, 1],
		[1024, 2],
		[64, 4],
		[32768, 0]
	])('makes at %d kB the passes that the temporary bytes show: %d', (memoryKb, passes) => {
		expect(sortPasses(pg15, run, memoryKb)).toBe(passes);
	});

	test('merges between 6 and 500 tapes at once', () => {
		expect([64, 4096, 10_000_000].map(mergeOrder)).toEqual([6, 15, 500]);
	});
});
