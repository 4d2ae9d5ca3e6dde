import { describe, expect, test } from 'vitest';
import { findIn, nodeAt } from '../../../../fixtures/symptom-plans';

describe('sort-spill', () => {
	test('gives method, size on disk and limit', () => {
		expect(findIn('sort-spill-013', 'sort-spill')[0]?.figures).toMatchObject({
			method: 'external merge',
			diskKb: 31944,
			passes: 1,
			limitKb: 4096
		});
	});

	test('adds leader and workers', () => {
		expect(findIn('sort-spill-015', 'sort-spill')[0]?.figures).toMatchObject({
			diskKb: 12024 + 8256 + 10856,
			processes: 3
		});
	});

	test('finds a worker’s file where the leader stayed in memory', () => {
		const found = findIn('sort-spill-015', 'sort-spill', (root) => {
			Object.assign(nodeAt(root, '0.0'), { 'Sort Method': 'quicksort', 'Sort Space Type': 'Memory' });
		});
		expect(found[0]?.figures.processes).toBe(2);
	});

	test('finds the sort inside an ordered or distinct aggregate by the blocks that it wrote', () => {
		expect(findIn('sort-spill-082', 'sort-spill')[0]?.figures).toMatchObject({
			method: 'inside an aggregate',
			temporaryBytes: 581 * 8192
		});
	});

	test('reports nothing where the aggregate only passes on what its input wrote', () => {
		const found = findIn('sort-spill-082', 'sort-spill', (root) => {
			nodeAt(root, '0.0')['Temp Written Blocks'] = root['Temp Written Blocks'];
		});
		expect(found).toEqual([]);
	});

	test.each(['healthy-061', 'healthy-062'])('reports nothing in %s, sorted in memory', (name) => {
		expect(findIn(name, 'sort-spill')).toEqual([]);
	});
});
