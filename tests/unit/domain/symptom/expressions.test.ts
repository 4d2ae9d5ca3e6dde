import { describe, expect, test } from 'vitest';
import {
	countPredicates,
	inspectSide,
	splitComparison,
	splitComparisons,
	tokenise
} from '$lib/domain/symptom/expressions';

// The forms are those in which PostgreSQL prints expressions (ruleutils.c), as seen on 15.18.

describe('countPredicates', () => {
	test.each([
		[null, 0],
		['', 0],
		["(state = 'staged'::text)", 1],
		['((a = 1) AND (b = 2) AND ((c = 3) OR (d = 4)))', 3],
		["(name = 'this AND that'::text)", 1],
		['((a >= ?) AND (a < ?))', 2]
	])('counts %j as %d', (condition, count) => {
		expect(countPredicates(condition)).toBe(count);
	});
});

describe('splitComparisons', () => {
	test('takes AND, OR and NOT apart down to single comparisons', () => {
		const parts = splitComparisons(tokenise('((a = 1) AND ((NOT (b > 2)) OR (c ~~ ?)))'));
		expect(parts.map((part) => part.map(({ text }) => text).join(' '))).toEqual(['a = 1', 'b > 2', 'c ~~ ?']);
	});

	test('keeps a literal with brackets and operators whole', () => {
		expect(splitComparisons(tokenise("(a = '((b = c) AND'::text)"))).toHaveLength(1);
	});

	test('ends on a condition that was cut off', () => {
		expect(splitComparisons(tokenise('((a = 1) AND (lower(b'))).not.toHaveLength(0);
	});
});

describe('splitComparison', () => {
	test.each([
		['a = 1', '='],
		["name !~~* 'x%'::text", '!~~*'],
		['tags @> ?', '@>'],
		['deleted_at IS NULL', 'IS']
	])('splits %s at %s', (text, operator) => {
		expect(splitComparison(tokenise(text))?.operator).toBe(operator);
	});

	test('finds none in an expression that only adds', () => {
		expect(splitComparison(tokenise('(a + b)'))).toBeNull();
	});
});

describe('inspectSide', () => {
	const inspect = (text: string) => inspectSide(tokenise(text));

	test('names columns without their table', () => {
		expect(inspect('i.invoice_no')).toEqual({
			columns: ['invoice_no'],
			aliases: ['i'],
			casts: [],
			functions: [],
			arithmetic: false,
			json: false
		});
		expect(inspect('"Order Line"."Line No"').columns).toEqual(['"Line No"']);
	});

	test('tells casts of columns from casts of constants', () => {
		expect(inspect('(a.b)::numeric').casts).toEqual(['numeric']);
		expect(inspect("'2026-01-01'::timestamp with time zone")).toMatchObject({ columns: [], casts: [] });
		expect(inspect('(x)::timestamp(3) without time zone').casts).toEqual(['timestamp without time zone']);
		expect(inspect('(ids)::integer[]').columns).toEqual(['ids']);
	});

	test('sees functions only where a column is inside', () => {
		expect(inspect("date_trunc('day'::text, booked_at)").functions).toEqual(['date_trunc']);
		expect(inspect("lower('ABC'::text)").functions).toEqual([]);
		expect(inspect('EXTRACT(year FROM booked_at)')).toMatchObject({
			columns: ['booked_at'],
			functions: ['EXTRACT']
		});
	});

	test('takes keywords, parameters and subqueries for no columns', () => {
		for (const text of ['CURRENT_DATE', '$1', '(SubPlan 2)', 'NULL::text', 'true', '(InitPlan 1).col1'])
			expect(inspect(text).columns, text).toEqual([]);
	});

	test('tells reaching into JSON from arithmetic', () => {
		expect(inspect("(attrs ->> 'seal'::text)")).toMatchObject({ json: true, arithmetic: false });
		expect(inspect('(quantity * 2)')).toMatchObject({ json: false, arithmetic: true });
	});
});
