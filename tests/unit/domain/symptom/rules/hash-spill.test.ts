import { describe, expect, test } from 'vitest';
import { allNodes, findIn, nodeAt } from '../../../../fixtures/symptom-plans';

describe('hash-spill', () => {
	test('tells a planned spill from one that grew', () => {
		expect(findIn('undersized-memory-004', 'hash-spill')[0]?.figures).toMatchObject({
			course: 'planned',
			batches: 8,
			plannedBatches: 8
		});
		expect(findIn('stale-statistics-001', 'hash-spill')[0]?.figures).toMatchObject({
			course: 'grown',
			batches: 8,
			plannedBatches: 1,
			peakKb: 8182,
			limitKb: 8192
		});
	});

	test('adds what both sides of the join wrote', () => {
		// Hash 1,800 blocks, the join above 5,252 of its own: 7,052 × 8,192 bytes.
		expect(findIn('stale-statistics-001', 'hash-spill')[0]?.figures.temporaryBytes).toBe(7052 * 8192);
	});

	test('reports every table of a plan', () => {
		expect(findIn('undersized-memory-005', 'hash-spill')).toHaveLength(2);
	});

	test.each(['healthy-059', 'healthy-086'])('reports nothing in %s, whose tables have one batch', (name) => {
		expect(findIn(name, 'hash-spill')).toEqual([]);
	});

	test('reports nothing once the batches are one', () => {
		const found = findIn('undersized-memory-004', 'hash-spill', (root) => {
			for (const node of allNodes(root)) if (node['Node Type'] === 'Hash') node['Hash Batches'] = 1;
		});
		expect(found).toEqual([]);
	});

	test('weighs the larger spill more', () => {
		const heavy = findIn('undersized-memory-004', 'hash-spill', (root) => {
			nodeAt(root, '0.0.0.0')['Temp Written Blocks'] = 900_000;
		});
		expect(heavy[0]?.weight).toBeGreaterThan(findIn('undersized-memory-004', 'hash-spill')[0]?.weight ?? 1);
	});
});
