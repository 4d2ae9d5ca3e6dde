import { describe, expect, test } from 'vitest';
import { allNodes, findIn, nodeAt } from '../../../../fixtures/symptom-plans';

describe('materialize-spill', () => {
	test('charges a WITH query’s file to the scan that read it first', () => {
		const found = findIn('materialize-spill-037', 'materialize-spill');
		expect(found.find(({ operator }) => operator === '0.1.0')?.figures.temporaryBytes).toBe(2178 * 8192);
	});

	test('finds a window’s rows and a function’s', () => {
		expect(findIn('materialize-spill-039', 'materialize-spill')[0]?.operator).toBe('0');
		expect(findIn('wrong-build-side-053', 'materialize-spill')[0]?.summary).toContain(
			'jsonb_array_elements_text'
		);
	});

	test('reports nothing where the input wrote all of it', () => {
		const found = findIn('materialize-spill-039', 'materialize-spill', (root) => {
			nodeAt(root, '0.0')['Temp Written Blocks'] = root['Temp Written Blocks'];
		});
		expect(found).toEqual([]);
	});

	test('reads the store’s own figure where there are no blocks (18 and newer)', () => {
		const found = findIn('materialize-spill-039', 'materialize-spill', (root) => {
			for (const node of allNodes(root)) delete node['Temp Written Blocks'];
			Object.assign(root, { Storage: 'Disk', 'Maximum Storage': 12240 });
		});
		expect(found[0]?.figures.temporaryBytes).toBe(12240 * 1024);
	});
});
