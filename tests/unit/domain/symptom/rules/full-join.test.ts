import { describe, expect, test } from 'vitest';
import { findIn, nodeAt, type JsonNode } from '../../../../fixtures/symptom-plans';

/** A nested loop of two scans without any condition, 2,000 by 1,500 rows. */
const product = (rows: number, filter?: string) => (root: JsonNode) => {
	const scan = (role: string, count: number, loops: number): JsonNode => ({
		'Node Type': 'Seq Scan',
		'Parent Relationship': role,
		'Relation Name': role.toLowerCase(),
		'Plan Rows': count,
		'Actual Rows': count,
		'Actual Loops': loops
	});
	const join: JsonNode = {
		'Node Type': 'Nested Loop',
		'Join Type': 'Inner',
		'Plan Rows': rows,
		'Actual Rows': rows,
		'Actual Loops': 1
	};
	if (filter !== undefined) join['Join Filter'] = filter;
	join.Plans = [scan('Outer', 2_000, 1), scan('Inner', 1_500, 2_000)];
	for (const key of Object.keys(root)) delete root[key];
	Object.assign(root, join);
};
const count = (edit: (root: JsonNode) => void) => findIn('healthy-060', 'full-join', edit).length;

describe('full-join', () => {
	test('finds the whole product of two tables', () => {
		expect(count(product(3_000_000))).toBe(1);
	});

	test('is never certain with a condition, nor where rows are missing from the product', () => {
		expect(count(product(3_000_000, '(a.x < b.y)'))).toBe(0);
		expect(count(product(2_999_999))).toBe(0);
	});

	test('leaves products with a handful of rows alone', () => {
		const few = (root: JsonNode) => {
			product(75_000)(root);
			nodeAt(root, '0.0')['Actual Rows'] = 50;
		};
		expect(count(few)).toBe(0);
	});
});
