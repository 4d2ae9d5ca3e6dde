import { describe, expect, test } from 'vitest';
import { allNodes, findIn } from '../../../../fixtures/symptom-plans';

describe('bitmap-lossy', () => {
	test('gives exact and lossy blocks', () => {
		expect(findIn('lossy-bitmap-031', 'bitmap-lossy')[0]?.figures).toMatchObject({
			exact: 672,
			lossy: 10325
		});
	});

	test('reports nothing while all blocks are exact', () => {
		expect(findIn('healthy-067', 'bitmap-lossy')).toEqual([]);
		const exact = findIn('lossy-bitmap-031', 'bitmap-lossy', (root) => {
			for (const node of allNodes(root)) if ('Lossy Heap Blocks' in node) node['Lossy Heap Blocks'] = 0;
		});
		expect(exact).toEqual([]);
	});
});
