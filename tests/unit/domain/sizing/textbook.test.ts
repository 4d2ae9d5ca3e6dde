import { describe, expect, test } from 'vitest';
import {
	externalSortIos,
	externalSortPasses,
	hybridHashIos,
	partitionedHashIos
} from '$lib/domain/sizing/textbook';

describe('externalSortPasses', () => {
	test('takes 4 passes and 864 page transfers for 108 pages and 5 buffers', () => {
		// Ramakrishnan/Gehrke ch. 13: runs of 22, then 6, 2, 1.
		expect(externalSortPasses(108, 5)).toBe(4);
		expect(externalSortIos(108, 5)).toBe(864);
	});

	test('takes two passes up to B(B-1) pages and three above', () => {
		expect([20, 21].map((pages) => externalSortPasses(pages, 5))).toEqual([2, 3]);
	});
});

describe('partitionedHashIos', () => {
	test('is 3(M + N)', () => {
		// Ramakrishnan/Gehrke: 1,000 and 500 pages: 4,500; Silberschatz/Korth/Sudarshan: 100 and 400: 1,500.
		expect(partitionedHashIos(1000, 500)).toBe(4500);
		expect(partitionedHashIos(100, 400)).toBe(1500);
	});

	test('writes and reads once more for each further level', () => {
		expect(partitionedHashIos(1000, 500, 2)).toBe(7500);
	});
});

describe('hybridHashIos', () => {
	test('is 3,000 for 1,000 and 500 pages with half of the build side kept', () => {
		// Ramakrishnan/Gehrke, 300 buffers: one of two partitions stays in memory.
		expect(hybridHashIos(1000, 500, 0.5)).toBe(3000);
	});
});
