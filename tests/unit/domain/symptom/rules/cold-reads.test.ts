import { describe, expect, test } from 'vitest';
import { findIn, type JsonNode } from '../../../../fixtures/symptom-plans';

const blocks = (hit: number, read: number) => (root: JsonNode) =>
	Object.assign(root, { 'Shared Hit Blocks': hit, 'Shared Read Blocks': read });
const count = (hit: number, read: number) => findIn('cold-cache-081', 'cold-reads', blocks(hit, read)).length;

describe('cold-reads', () => {
	test('needs ten thousand blocks of which four fifths were read', () => {
		expect(count(0, 9_999)).toBe(0);
		expect(count(2_001, 7_999)).toBe(0);
		expect(count(2_000, 8_000)).toBe(1);
	});

	test('belongs to the plan as a whole', () => {
		expect(findIn('cold-cache-081', 'cold-reads')[0]).toMatchObject({
			operator: null,
			figures: { hit: 0, read: 16050, share: 1 }
		});
	});

	test('says nothing without block counts', () => {
		const without = findIn('cold-cache-081', 'cold-reads', (root) => {
			delete root['Shared Hit Blocks'];
			delete root['Shared Read Blocks'];
		});
		expect(without).toEqual([]);
	});
});
