import { describe, expect, test } from 'vitest';
import { findIn, nodeAt, type JsonNode } from '../../../../fixtures/symptom-plans';

describe('filter-discards-most', () => {
	test('gives what was read and kept, and the masked condition', () => {
		const [found] = findIn('missing-index-filter-019', 'filter-discards-most');
		expect(found?.figures).toMatchObject({ kept: 8, relation: 'yard_move' });
		expect(found?.figures.read).toBe(1_300_000);
	});

	const scanOf = (removed: number, kept: number, loops: number) => (root: JsonNode) =>
		Object.assign(nodeAt(root, '0.0.0'), {
			'Rows Removed by Filter': removed,
			'Actual Rows': kept,
			'Actual Loops': loops
		});

	test('needs ten thousand rows of which 99 % go', () => {
		const count = (removed: number, kept: number, loops = 1) =>
			findIn('missing-index-filter-019', 'filter-discards-most', scanOf(removed, kept, loops)).length;
		expect(count(9_998, 1)).toBe(0);
		expect(count(9_999, 1)).toBe(1);
		expect(count(98_900, 1_100)).toBe(0);
		expect(count(99_000, 1_000)).toBe(1);
	});

	test('takes up to eight loops together and more of them one by one', () => {
		const count = (loops: number) =>
			findIn('missing-index-filter-019', 'filter-discards-most', scanOf(2_000, 1, loops)).length;
		expect(count(8)).toBe(1);
		expect(count(9)).toBe(0);
	});

	test('says nothing of rows that a join removed', () => {
		expect(findIn('missing-index-join-024', 'filter-discards-most')).toEqual([]);
	});
});
