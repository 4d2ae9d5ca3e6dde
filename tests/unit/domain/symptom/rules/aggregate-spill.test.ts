import { describe, expect, test } from 'vitest';
import { findIn } from '../../../../fixtures/symptom-plans';

describe('aggregate-spill', () => {
	test('gives batches, size on disk and what was planned', () => {
		expect(findIn('hash-aggregate-spill-016', 'aggregate-spill')[0]?.figures).toMatchObject({
			batches: 21,
			diskKb: 15360,
			plannedPartitions: 0,
			limitKb: 8192
		});
	});

	test('takes partitions that were planned and not needed as no spill', () => {
		expect(
			findIn('hash-aggregate-spill-016', 'aggregate-spill', (root) =>
				Object.assign(root, { 'Planned Partitions': 4, 'HashAgg Batches': 1, 'Disk Usage': 0 })
			)
		).toEqual([]);
	});

	test.each(['healthy-063', 'healthy-058'])('reports nothing in %s, whose groups fit', (name) => {
		expect(findIn(name, 'aggregate-spill')).toEqual([]);
	});
});
