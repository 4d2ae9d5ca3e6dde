import { describe, expect, test } from 'vitest';
import { allNodes, findIn, nodeAt, type JsonNode } from '../../../../fixtures/symptom-plans';

// analysis of q-error: Moerkotte, Neumann, Steidl, PVLDB 2(1) 2009; a factor of 10 as "wrong": Leis et al., PVLDB 9(3) 2015.
describe('estimates', () => {
	test('reports an underestimate once, where it begins', () => {
		const found = findIn('stale-statistics-001', 'row-underestimate');
		expect(found).toHaveLength(1);
		expect(found[0]).toMatchObject({
			operator: '0.0.0.1.0',
			figures: { estimated: 800, actual: 450300, q: 562.88, relation: 'invoice_line', predicates: 1 }
		});
	});

	test('reports it again where it grows by another factor of ten', () => {
		const found = findIn('stale-statistics-001', 'row-underestimate', (root) => {
			nodeAt(root, '0.0.0')['Plan Rows'] = 70;
		});
		expect(found.map(({ operator }) => operator).sort()).toEqual(['0.0.0', '0.0.0.1.0']);
		expect(found.find(({ operator }) => operator === '0.0.0')?.summary).toContain('grows worse');
	});

	test.each([
		['just below a factor of ten', { 'Plan Rows': 1100, 'Actual Rows': 10900 }],
		['just below a thousand rows', { 'Plan Rows': 1, 'Actual Rows': 999 }],
		['no rows in no loops', { 'Plan Rows': 100000, 'Actual Rows': 0, 'Actual Loops': 0 }]
	])('reports nothing at %s', (_what, figures) => {
		const edit = (root: JsonNode) => {
			for (const node of allNodes(root)) Object.assign(node, { 'Plan Rows': 5, 'Actual Rows': 5 });
			Object.assign(nodeAt(root, '0.0.0.1.0'), figures);
		};
		expect(findIn('stale-statistics-001', 'row-underestimate', edit)).toEqual([]);
		expect(findIn('stale-statistics-001', 'row-overestimate', edit)).toEqual([]);
	});

	test('never looks at a Hash, which repeats its input', () => {
		const found = findIn('stale-statistics-001', 'row-underestimate', (root) => {
			for (const node of allNodes(root)) Object.assign(node, { 'Plan Rows': 5, 'Actual Rows': 5 });
			Object.assign(nodeAt(root, '0.0.0.1'), { 'Plan Rows': 1, 'Actual Rows': 450300 });
		});
		expect(found).toEqual([]);
	});

	test('takes rows that a limit did not ask for as no error', () => {
		expect(findIn('healthy-084', 'row-overestimate')).toEqual([]);
		const unlimited = findIn('healthy-084', 'row-overestimate', (root) => {
			for (const node of allNodes(root)) if (node['Node Type'] === 'Limit') node['Node Type'] = 'Result';
		});
		expect(unlimited.length).toBeGreaterThan(0);
	});

	test('takes rows that a semi join or a merge join left unread as no error', () => {
		expect(findIn('healthy-085', 'row-overestimate')).toEqual([]);
		expect(findIn('healthy-086', 'row-overestimate')).toEqual([]);
	});

	test('reports an overestimate of a scan that was read to its end', () => {
		expect(findIn('table-bloat-043', 'row-overestimate')[0]).toMatchObject({
			figures: { estimated: 900000, actual: 6000, q: 150 }
		});
	});

	test('takes rows read again after a merge join stepped back as no error', () => {
		const found = findIn('stale-statistics-001', 'row-underestimate', (root) => {
			for (const node of allNodes(root)) Object.assign(node, { 'Plan Rows': 5, 'Actual Rows': 5 });
			nodeAt(root, '0.0.0')['Node Type'] = 'Merge Join';
			Object.assign(nodeAt(root, '0.0.0.1'), {
				'Node Type': 'Materialize',
				'Plan Rows': 1,
				'Actual Rows': 450300
			});
		});
		expect(found).toEqual([]);
	});
});
