import { describe, expect, it } from 'vitest';
import { readOutline } from '$lib/domain/markdown/outline';
import { readSteps } from '$lib/domain/markdown/steps';

const BODY = `Why this is here.

## Before you use this on production

Read the manual of your version.

## Steps

### 1. Look at the statistics (check)

Are they old?

\`\`\`sql
select last_analyze from pg_stat_user_tables
where relname = '{{table}}';
\`\`\`

### 2. Refresh them (action)

> Caution: plans of every session may change.
> Keep the present one.

> A colleague's note, no caution.

\`\`\`sql
-- # not a heading
analyze {{table}};
\`\`\`

\`\`\`text
### 9. Neither is this (wait)
\`\`\`

#### What to expect

Seconds.

### 3. Look again (verify)

## Remarks

Written after three month-ends.
`;

describe('readSteps', () => {
	it('names the line of a kind that it does not know, and keeps the step', () => {
		const { steps, problems } = readSteps('### 1. Do it (magic)\n');
		expect(problems).toEqual([
			{ field: 'body', message: 'Line 1: "magic" is no kind of step: check, action, verify, undo, wait.' }
		]);
		expect(steps).toHaveLength(1);
	});

	it('says that a numbered heading without a kind is meant as a step', () => {
		expect(readSteps('### 1. Do it\n').problems[0]?.message).toMatch(
			/^Line 1: a step's heading ends with its kind/
		);
	});

	it('says which number is out of order', () => {
		const { problems } = readSteps('### 1. A (check)\n### 3. B (action)\n');
		expect(problems).toEqual([{ field: 'body', message: 'Line 2: step 3 stands where step 2 is expected.' }]);
	});

	it('asks for a first step where there is none', () => {
		expect(readSteps('Only text.').problems).toHaveLength(1);
	});

	it('reads titles, kinds, statements and cautions in order', () => {
		const { steps, problems } = readSteps(BODY);
		expect(problems).toEqual([]);
		expect(steps.map(({ number, title, kind }) => [number, title, kind])).toEqual([
			[1, 'Look at the statistics', 'check'],
			[2, 'Refresh them', 'action'],
			[3, 'Look again', 'verify']
		]);
		expect(steps[0]?.sql).toEqual([
			"select last_analyze from pg_stat_user_tables\nwhere relname = '{{table}}';"
		]);
		expect(steps[1]?.sql).toEqual(['-- # not a heading\nanalyze {{table}};']);
		expect(steps[1]?.caution).toBe('plans of every session may change.\nKeep the present one.');
	});

	it('keeps the rest of a step as its text: other quotations, other blocks, small headings', () => {
		const text = readSteps(BODY).steps[1]?.body ?? '';
		expect(text).toContain("> A colleague's note, no caution.");
		expect(text).toContain('### 9. Neither is this (wait)');
		expect(text).toContain('#### What to expect\n\nSeconds.');
		expect(text).not.toContain('analyze {{table}}');
	});

	it('parts what stands before the steps from what stands after', () => {
		const { introduction, remarks } = readSteps(BODY);
		expect(introduction).toMatch(/^Why this is here\.[\s\S]+manual of your version\.\n\n## Steps$/);
		expect(remarks).toBe('## Remarks\n\nWritten after three month-ends.');
	});
});

describe('readOutline', () => {
	it('takes no heading out of a fenced block, whatever its fence (CommonMark 0.31, 4.5)', () => {
		expect(readOutline('~~~\n# a\n```\n~~~\n# b #\n').map(({ title }) => title)).toEqual(['', 'b']);
	});
});
