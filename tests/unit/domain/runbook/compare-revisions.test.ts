import { describe, expect, it } from 'vitest';
import { cautionsFor } from '$lib/domain/caution/classify-statement';
import { readSteps } from '$lib/domain/markdown/steps';
import { compareRevisions, compareTexts, type TextPart } from '$lib/domain/runbook/compare-revisions';

const sideOf = async (revision: number, body: string) => ({
	revision,
	input: {
		title: 'Index the yard moves',
		summary: 'When a scan throws everything away.',
		body,
		engines: ['postgresql' as const],
		symptoms: ['filter-discards-most' as const],
		reviewEveryDays: 180 + revision
	},
	steps: await Promise.all(
		readSteps(body).steps.map(async (step) => ({
			step,
			cautions: (await Promise.all(step.sql.map((sql) => cautionsFor('postgresql', null, sql)))).flat()
		}))
	)
});

const step = (number: number, title: string, sql: string) =>
	`### ${number}. ${title} (action)\n\n\`\`\`sql\n${sql}\n\`\`\`\n\n`;

const join = (parts: readonly TextPart[], without: TextPart['change']) =>
	parts
		.filter(({ change }) => change !== without)
		.map(({ text }) => text)
		.join('');

describe('compareTexts', () => {
	it.each([
		['nothing and something', '', 'one two'],
		['texts with changed white space', 'a  b\nc', 'a b\n\nc'],
		['more differing words than are weighed', 'a '.repeat(4000), 'b '.repeat(4000)]
	])('holds both of %s whole', (_what, before, after) => {
		const parts = compareTexts(before, after);
		expect(join(parts, 'added')).toBe(before);
		expect(join(parts, 'removed')).toBe(after);
	});
});

describe('compareRevisions', () => {
	it('puts a raised caution first, then a lowered one, new statements and those that are gone', async () => {
		const before = await sideOf(
			1,
			step(1, 'Look', 'select 1') +
				step(2, 'Build', 'create index concurrently i on t (a)') +
				step(3, 'Clear', 'vacuum full t') +
				step(4, 'Forget', 'truncate t')
		);
		const after = await sideOf(
			2,
			step(1, 'Count', 'analyze t') +
				step(2, 'Look', 'select 1') +
				step(3, 'Build', 'create index i on t (a)') +
				step(4, 'Clear', 'vacuum t')
		);
		const { cautions } = compareRevisions('x', before, after);
		expect(
			cautions.map(({ title, before: was, after: is }) => [title, was?.level ?? null, is?.level ?? null])
		).toEqual([
			['Build', 2, 3],
			['Clear', 3, 2],
			['Count', null, 2],
			['Forget', 3, null]
		]);
	});

	it('says nothing of statements that only moved, and names each field that differs', async () => {
		const one = step(1, 'Build', 'create index i on t (a)');
		const comparison = compareRevisions(
			'x',
			await sideOf(1, one + step(2, 'Look', 'select 1')),
			await sideOf(2, step(1, 'Look', 'select 1') + one.replace('1.', '2.'))
		);
		expect(comparison.cautions).toEqual([]);
		expect(comparison.fields.map(({ field }) => field)).toEqual(['reviewEveryDays']);
	});
});
