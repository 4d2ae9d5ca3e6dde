import { describe, expect, test } from 'vitest';
import { allNodes, findIn, type JsonNode } from '../../../../fixtures/symptom-plans';

describe('repeated-inner-scan', () => {
	test('finds the inner side without an index', () => {
		const [found] = findIn('missing-index-join-024', 'repeated-inner-scan');
		expect(found?.figures).toMatchObject({ loops: 12000, rowsTouched: 18_000_000 });
	});

	test('finds a subquery in an expression', () => {
		const [found] = findIn('missing-index-join-022', 'repeated-inner-scan');
		expect(found?.summary).toContain('scan of yard_move');
		expect(found?.figures.rowsTouched).toBeGreaterThan(18_000_000);
	});

	test('finds an index access that ran away under an underestimate', () => {
		const [found] = findIn('nested-loop-blowup-025', 'repeated-inner-scan');
		expect(found?.figures).toMatchObject({ loops: 65881, outerError: 65881 });
	});

	test('leaves a foreseen loop by index alone', () => {
		expect(findIn('healthy-083', 'repeated-inner-scan')).toEqual([]);
		const foreseen = findIn('nested-loop-blowup-025', 'repeated-inner-scan', (root) => {
			for (const node of allNodes(root)) node['Plan Rows'] = node['Actual Rows'];
		});
		expect(foreseen).toEqual([]);
	});

	const inner = (loops: number, rows: number) => (root: JsonNode) => {
		for (const node of allNodes(root)) {
			if (node['Parent Relationship'] === 'Inner')
				Object.assign(node, { 'Actual Loops': loops, 'Actual Rows': rows });
			delete node['Rows Removed by Join Filter'];
		}
	};

	test('needs a hundred runs and a million rows looked at', () => {
		const count = (loops: number, rows: number) =>
			findIn('missing-index-join-024', 'repeated-inner-scan', inner(loops, rows)).length;
		expect(count(99, 20_000)).toBe(0);
		expect(count(100, 9_999)).toBe(0);
		expect(count(100, 10_000)).toBe(1);
	});

	test('counts only the misses behind a cache', () => {
		const cached = findIn('missing-index-join-024', 'repeated-inner-scan', (root) => {
			const materialize = allNodes(root).find((node) => node['Node Type'] === 'Materialize');
			Object.assign(materialize ?? {}, { 'Node Type': 'Memoize', 'Cache Hits': 11990, 'Cache Misses': 10 });
		});
		expect(cached).toEqual([]);
	});

	test('says nothing of a plan without figures', () => {
		expect(findIn('nested-loop-blowup-078', 'repeated-inner-scan')).toEqual([]);
	});
});
