import { describe, expect, test } from 'vitest';
import { allNodes, findIn, type JsonNode } from '../../../../fixtures/symptom-plans';

describe('heap-fetches-high', () => {
	test('gives fetches and rows', () => {
		expect(findIn('stale-visibility-map-040', 'heap-fetches-high')[0]?.figures).toMatchObject({
			fetches: 119507,
			rows: 119507
		});
	});

	const scanOf = (fetches: number, rows: number) => (root: JsonNode) => {
		for (const node of allNodes(root)) {
			if (node['Node Type'] === 'Index Only Scan')
				Object.assign(node, { 'Heap Fetches': fetches, 'Actual Rows': rows, 'Actual Loops': 1 });
		}
	};

	test('needs a thousand fetches and a tenth of the rows', () => {
		const count = (fetches: number, rows: number) =>
			findIn('stale-visibility-map-040', 'heap-fetches-high', scanOf(fetches, rows)).length;
		expect(count(999, 1_000)).toBe(0);
		expect(count(1_000, 10_001)).toBe(0);
		expect(count(1_000, 10_000)).toBe(1);
	});

	test('reports nothing where the index alone answered', () => {
		expect(findIn('healthy-065', 'heap-fetches-high')).toEqual([]);
	});
});
