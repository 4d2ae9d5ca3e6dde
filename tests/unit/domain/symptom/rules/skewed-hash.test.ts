import { describe, expect, test } from 'vitest';
import { allNodes, findIn, type JsonNode } from '../../../../fixtures/symptom-plans';

describe('skewed-hash', () => {
	test.each(['skewed-join-key-007', 'skewed-join-key-008', 'skewed-join-key-009'])(
		'finds the key that no splitting parts in %s',
		(name) => {
			expect(findIn(name, 'skewed-hash')).toHaveLength(1);
		}
	);

	test.each(['stale-statistics-001', 'undersized-memory-005', 'undersized-memory-006'])(
		'reports nothing in %s, whose batches fit',
		(name) => {
			expect(findIn(name, 'skewed-hash')).toEqual([]);
		}
	);

	const hashOf = (peakKb: number, batches: number) => (root: JsonNode) => {
		for (const node of allNodes(root)) {
			if (node['Node Type'] === 'Hash')
				Object.assign(node, {
					'Peak Memory Usage': peakKb,
					'Hash Batches': batches,
					'Original Hash Batches': 4
				});
		}
	};

	test('needs half as much again as the limit, or sixteen times the batches and still more than the limit', () => {
		// The plan's limit is 4 MB × 2.
		expect(findIn('skewed-join-key-007', 'skewed-hash', hashOf(8192 * 1.5, 8))).toEqual([]);
		expect(findIn('skewed-join-key-007', 'skewed-hash', hashOf(8192 * 1.51, 8))).toHaveLength(1);
		expect(findIn('skewed-join-key-007', 'skewed-hash', hashOf(8200, 32))).toEqual([]);
		expect(findIn('skewed-join-key-007', 'skewed-hash', hashOf(8200, 64))).toHaveLength(1);
		expect(findIn('skewed-join-key-007', 'skewed-hash', hashOf(8192, 64))).toEqual([]);
	});

	test('says nothing of a table that processes share', () => {
		const found = findIn('skewed-join-key-007', 'skewed-hash', (root) => {
			for (const node of allNodes(root)) if (node['Node Type'] === 'Hash') node['Parallel Aware'] = true;
		});
		expect(found).toEqual([]);
	});

	test('takes the larger table that 18 chooses on purpose as no skew', () => {
		// 18.7, 64 kB × 1: 32 batches and a peak of 575 kB, nine times hash_mem, for 200,000 rows of width 59.
		const edit = (disabled: boolean) => (root: JsonNode, envelope: JsonNode) => {
			envelope.Settings = { work_mem: '64kB', hash_mem_multiplier: '1' };
			for (const node of allNodes(root)) {
				if (disabled) node.Disabled = false;
				if (node['Node Type'] !== 'Hash') continue;
				Object.assign(node, { 'Peak Memory Usage': 575, 'Hash Batches': 32, 'Original Hash Batches': 32 });
				Object.assign(node, { 'Plan Rows': 200000, 'Actual Rows': 200000, 'Plan Width': 59 });
			}
		};
		expect(findIn('skewed-join-key-007', 'skewed-hash', edit(true))).toEqual([]);
		expect(findIn('skewed-join-key-007', 'skewed-hash', edit(false))).toHaveLength(1);
	});
});
