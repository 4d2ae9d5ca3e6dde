import { describe, expect, test } from 'vitest';
import { allNodes, findIn, type JsonNode } from '../../../../fixtures/symptom-plans';

describe('build-side-larger', () => {
	test('gives both sides', () => {
		expect(findIn('missing-index-join-023', 'build-side-larger')[0]?.figures).toMatchObject({
			buildRows: 1200000,
			probeRows: 90
		});
	});

	const sides = (built: number, probing: number) => (root: JsonNode) => {
		for (const node of allNodes(root)) {
			if (node['Node Type'] === 'Hash Join') Object.assign(node.Plans?.[0] ?? {}, { 'Actual Rows': probing });
			if (node['Node Type'] === 'Hash') node['Actual Rows'] = built;
		}
	};

	test('needs three times as many rows, and ten thousand', () => {
		expect(findIn('missing-index-join-023', 'build-side-larger', sides(29_999, 10_000))).toEqual([]);
		expect(findIn('missing-index-join-023', 'build-side-larger', sides(30_000, 10_000))).toHaveLength(1);
		expect(findIn('missing-index-join-023', 'build-side-larger', sides(9_999, 90))).toEqual([]);
	});

	test.each(['stale-statistics-001', 'wrong-build-side-054', 'healthy-059'])(
		'reports nothing in %s',
		(name) => {
			expect(findIn(name, 'build-side-larger')).toEqual([]);
		}
	);

	test('says nothing of a probing side that a limit stopped', () => {
		const found = findIn('missing-index-join-023', 'build-side-larger', (root) => {
			const join = { ...root };
			for (const key of Object.keys(root)) delete root[key];
			Object.assign(root, {
				'Node Type': 'Limit',
				'Plan Rows': 5,
				'Actual Rows': 5,
				'Actual Loops': 1,
				Plans: [join]
			});
		});
		expect(found).toEqual([]);
	});
});
