import { describe, expect, it } from 'vitest';
import { cautionsFor } from '$lib/domain/caution/classify-statement';
import { parseRunbook } from '$lib/domain/runbook/parse-runbook';
import { highestLevel, reasonsAgainstPublishing } from '$lib/domain/runbook/publish-gate';
import { contentRunbooks } from '$lib/server/runbooks/content-runbooks';

const runbooks = contentRunbooks();

async function weigh(markdown: string) {
	return Promise.all(
		parseRunbook(markdown).steps.map(async (step) => ({
			step,
			cautions: (await Promise.all(step.sql.map((sql) => cautionsFor('postgresql', '15', sql)))).flat()
		}))
	);
}

describe('content/runbooks', () => {
	it('holds at least ten', () => {
		expect(runbooks.length).toBeGreaterThanOrEqual(10);
	});

	describe.each(runbooks)('$slug', ({ markdown }) => {
		const { input, problems } = parseRunbook(markdown);

		it('has front matter and steps without a problem', () => {
			expect(problems).toEqual([]);
			expect(input).not.toBeNull();
		});

		it('puts the vendor’s documentation and change control before production', () => {
			const section = (input?.body ?? '').split('## Before you use this on production')[1]?.split('###')[0] ?? '';
			expect(section).toMatch(/documentation of your version comes first/);
			expect(section).toMatch(/change control comes next/);
		});

		it('passes the gate that every published runbook has to pass', async () => {
			expect(reasonsAgainstPublishing(input?.body ?? '', await weigh(markdown))).toEqual([]);
		});

		it('holds only statements that PostgreSQL’s own grammar accepts and the lock table knows', async () => {
			const cautions = (await weigh(markdown)).flatMap((step) => step.cautions);
			expect(cautions.filter(({ understood }) => !understood)).toEqual([]);
		});

		it('only reads in its checks and verifications', async () => {
			const steps = (await weigh(markdown)).filter(({ step }) => step.kind === 'check' || step.kind === 'verify');
			expect(highestLevel(steps)).toBeLessThanOrEqual(1);
		});

		it('refers to runbooks that exist', () => {
			const links = [...markdown.matchAll(/\]\(\/runbooks\/([a-z0-9-]+)\)/g)].map((found) => found[1]);
			expect(runbooks.map(({ slug }) => slug)).toEqual(expect.arrayContaining(links));
		});
	});
});
