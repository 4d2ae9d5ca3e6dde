import { describe, expect, it } from 'vitest';
import { parseRunbook } from '$lib/domain/runbook/parse-runbook';

const FILE = `---
title: Refresh statistics of one table
summary: For an estimate that went wrong after a load.
engines: [postgresql]
symptoms: [row-underestimate]
reviewEveryDays: 180
owner: ilse.marten@northmoor.example
---

## Before you use this on production

Read the manual of your version.

### 1. Look (check)
`;

describe('parseRunbook', () => {
	it('lists every field that does not fit, and still reads the steps', () => {
		const parsed = parseRunbook(
			FILE.replace('[row-underestimate]', '[slowness]')
				.replace('180', '1')
				.replace(/^summary.*$/m, '')
		);
		expect(parsed.input).toBeNull();
		expect(parsed.problems.map(({ field }) => field).sort()).toEqual([
			'reviewEveryDays',
			'summary',
			'symptoms.0'
		]);
		expect(parsed.steps).toHaveLength(1);
	});

	it('refuses front matter that is no YAML', () => {
		expect(parseRunbook('---\n: : [\n---\n').problems[0]?.field).toBe('front matter');
	});

	it('asks for the section on production', () => {
		const parsed = parseRunbook(FILE.replace('## Before you use this on production', '## Notes'));
		expect(parsed.problems).toEqual([
			{
				field: 'body',
				message: 'The section "## Before you use this on production" is missing before the first step.'
			}
		]);
	});

	it('reads a runbook', () => {
		const parsed = parseRunbook(FILE);
		expect(parsed.problems).toEqual([]);
		expect(parsed.owner).toBe('ilse.marten@northmoor.example');
		expect(parsed.input).toMatchObject({
			title: 'Refresh statistics of one table',
			engines: ['postgresql'],
			reviewEveryDays: 180
		});
		expect(parsed.input?.body).toMatch(/^## Before you use this/);
	});
});
