import { describe, expect, it } from 'vitest';
import { cautionsFor } from '$lib/domain/caution/classify-statement';
import { readSteps } from '$lib/domain/markdown/steps';
import { highestLevel, reasonsAgainstPublishing } from '$lib/domain/runbook/publish-gate';

const BEFORE = '## Before you use this on production\n\nAsk first.\n\n';

async function weigh(body: string) {
	return Promise.all(
		readSteps(body).steps.map(async (step) => ({
			step,
			cautions: (await Promise.all(step.sql.map((sql) => cautionsFor('postgresql', '15', sql)))).flat()
		}))
	);
}

const sql = (text: string) => `\n\`\`\`sql\n${text}\n\`\`\`\n`;

describe('reasonsAgainstPublishing', () => {
	it('lists every reason: no check before, no verification after, no way back', async () => {
		const body = `${BEFORE}### 1. Build (action)\n${sql('create index concurrently i on t (a)')}`;
		expect(reasonsAgainstPublishing(body, await weigh(body))).toEqual([
			'Step 1 changes production, and no check stands before it.',
			'Step 1 changes production, and no verification stands after it.',
			'It changes production, and there is no way back: add an undo step.'
		]);
	});

	it('asks for a curator’s caution where a statement is not understood', async () => {
		const body = `${BEFORE}### 1. Look (check)\n${sql('select tidy_up()')}\n### 2. Again (check)\n\n> Caution: tidies only its own log.\n${sql('select tidy_up()')}`;
		const reasons = reasonsAgainstPublishing(body, await weigh(body));
		expect(reasons[0]).toBe(
			'Step 1 has a statement that is not understood: a curator has to write its caution.'
		);
		expect(reasons.join()).not.toContain('Step 2 has a statement');
	});

	it('is not fooled by a changing statement in a step that calls itself a check', async () => {
		const body = `${BEFORE}### 1. Look (check)\n${sql('vacuum t')}`;
		expect(reasonsAgainstPublishing(body, await weigh(body))).toHaveLength(3);
	});

	it('lets a runbook pass that only reads', async () => {
		const body = `${BEFORE}### 1. Look (check)\n${sql('select 1')}`;
		expect(reasonsAgainstPublishing(body, await weigh(body))).toEqual([]);
	});

	it('lets one pass that has check, action, verification and undo in order', async () => {
		const body = `${BEFORE}### 1. Look (check)\n### 2. Build (action)\n${sql('create index i on t (a)')}\n### 3. See (verify)\n### 4. Back (undo)\n${sql('drop index i')}`;
		const steps = await weigh(body);
		expect(reasonsAgainstPublishing(body, steps)).toEqual([]);
		expect(highestLevel(steps)).toBe(3);
	});
});
