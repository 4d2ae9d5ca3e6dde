import { describe, expect, test } from 'vitest';
import { allNodes, findIn, type JsonNode } from '../../../../fixtures/symptom-plans';

const limitOf = (brought: number, returned: number) => (root: JsonNode) => {
	for (const node of allNodes(root)) {
		if (node['Node Type'] !== 'Limit') continue;
		node['Actual Rows'] = returned;
		Object.assign(node.Plans?.[0] ?? {}, { 'Actual Rows': brought, 'Actual Loops': 1 });
	}
};
const count = (brought: number, returned: number) =>
	findIn('deep-offset-pagination-049', 'deep-offset', limitOf(brought, returned)).length;

describe('deep-offset', () => {
	test('needs ten thousand rows brought and a hundredth given back', () => {
		expect(count(9_999, 10)).toBe(0);
		expect(count(10_000, 101)).toBe(0);
		expect(count(10_000, 100)).toBe(1);
	});

	test('gives both counts', () => {
		expect(findIn('deep-offset-pagination-049', 'deep-offset')[0]?.figures).toEqual({
			brought: 620050,
			returned: 50
		});
	});

	test('leaves a plain limit alone', () => {
		expect(findIn('healthy-062', 'deep-offset')).toEqual([]);
	});
});
