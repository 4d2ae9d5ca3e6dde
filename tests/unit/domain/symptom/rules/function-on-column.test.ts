import { describe, expect, test } from 'vitest';
import { findIn, nodeAt, type JsonNode } from '../../../../fixtures/symptom-plans';

/** The scan of the captured plan with another condition. */
const withFilter =
	(filter: string, figures: Record<string, number> = {}) =>
	(root: JsonNode) => {
		const scan = nodeAt(root, '0');
		Object.assign(scan, { Filter: filter, ...figures });
	};
const count = (filter: string, figures?: Record<string, number>) =>
	findIn('non-sargable-predicate-028', 'function-on-column', withFilter(filter, figures)).length;

// How PostgreSQL prints conditions: ruleutils.c; the forms below were seen on 15.18.
describe('function-on-column', () => {
	test.each([
		["(lower(container_no) = 'cnu00412077'::text)"],
		["((invoice_id)::numeric = '412207'::numeric)"],
		["(to_char(moved_at, 'YYYY-MM-DD'::text) = '2026-02-11'::text)"],
		["((split_part(voyage, '-'::text, 2) = 'W'::text) AND (teu > 2))"],
		["(EXTRACT(month FROM booked_at) = '1'::numeric)"],
		['(("left"(ref, 2))::text = \'SH\'::text)'],
		['((quantity * 2) > 100)'],
		["((booked_at + '1 day'::interval) > now())"],
		["(COALESCE(status, 'open'::text) = 'open'::text)"],
		["((booked_at)::date = '2026-02-11'::date)"],
		["(NOT (lower((code)::text) = 'x'::text))"]
	])('finds %s', (filter) => {
		expect(count(filter)).toBe(1);
	});

	test.each([
		["(container_no = 'CNU00412077'::text)"],
		["((status)::text = 'open'::text)"],
		["(booked_at > (now() - '7 days'::interval))"],
		["(container_no = lower('CNU00412077'::text))"],
		["((attrs ->> 'seal'::text) = 'ok'::text)"],
		["((lodged_at >= '2026-01-01 00:00:00+00'::timestamp with time zone) AND (code < 45))"],
		["(country = ANY ('{K1,K17}'::text[]))"],
		['(total > $0)'],
		['(hashed SubPlan 1)'],
		['(deleted_at IS NULL)'],
		['(customer_id = (InitPlan 1).col1)'],
		// A column of the outer query, as 15.18 prints it: an index on pages could serve.
		['(pages = (m.tier + 100))'],
		['(name = lower(outer_list.name))']
	])('finds nothing in %s', (filter) => {
		expect(count(filter, { 'Plan Rows': 40 })).toBe(0);
	});

	test('needs ten thousand rows thrown away, nine of ten that were read', () => {
		const lower = "(lower(container_no) = 'x'::text)";
		expect(count(lower, { 'Rows Removed by Filter': 9_999, 'Actual Rows': 1 })).toBe(0);
		expect(count(lower, { 'Rows Removed by Filter': 10_000, 'Actual Rows': 1 })).toBe(1);
		expect(count(lower, { 'Rows Removed by Filter': 89_000, 'Actual Rows': 11_000 })).toBe(0);
	});

	test('tells a number cast to text by the planner’s guess of one row in 200', () => {
		const figures = { 'Rows Removed by Filter': 899_999, 'Actual Rows': 1 };
		expect(count("((order_no)::text = '412'::text)", { ...figures, 'Plan Rows': 4500 })).toBe(1);
		expect(count("((order_no)::text = '412'::text)", { ...figures, 'Plan Rows': 1 })).toBe(0);
	});

	test('names what wraps the column', () => {
		expect(findIn('non-sargable-predicate-028', 'function-on-column')[0]?.figures.wrapping).toBe('lower(…)');
		expect(findIn('non-sargable-predicate-029', 'function-on-column')[0]?.figures.wrapping).toBe(
			'a cast to numeric'
		);
	});
});
