import { describe, expect, it } from 'vitest';
import { SYSTEM, type Actor } from '$lib/domain/person/person';
import { write } from '$lib/server/db/transaction';
import { select } from '$lib/server/db/query';
import * as attempts from '$lib/server/incidents/attempts-service';
import { insertRunbook } from '$lib/server/runbooks/runbook-write-store';
import * as runbooks from '$lib/server/runbooks/runbooks-service';
import { withDatabase } from '../../../fixtures/database';
import { makeIncident } from '../../../fixtures/factories/incident';

withDatabase();

function valueOf<T>(outcome: { ok: true; value: T } | { ok: false; problem: { detail: string } }): T {
	if (!outcome.ok) throw new Error(outcome.problem.detail);
	return outcome.value;
}

const nobody: Actor = { ...SYSTEM, role: 'reader' };

async function tryRunbook(slug: string, outcome: 'worked' | 'partly' | 'no-effect' | 'made-worse' | null) {
	const number = await makeIncident({ title: 'Invoice preview slow' });
	const attempt = valueOf(await attempts.start(SYSTEM, number, { runbook: slug }));
	if (outcome !== null)
		valueOf(await attempts.update(SYSTEM, number, attempt.id, attempt.revision, { outcome }));
}

describe('adoptContent', () => {
	it('takes the runbooks in once: what a team removed does not come back', async () => {
		const adopted = await runbooks.adoptContent();
		expect(adopted).toBeGreaterThanOrEqual(10);
		expect(await runbooks.adoptContent()).toBe(0);
		expect(await select('SELECT id FROM runbooks')).toHaveLength(adopted);
	});

	it('publishes them, due for review after their interval, and notes it in the audit trail', async () => {
		await runbooks.adoptContent();
		const page = valueOf(await runbooks.list(nobody));
		expect(
			page.items.every(
				({ state, revision, reviewDue }) => state === 'published' && revision === 1 && reviewDue !== null
			)
		).toBe(true);
		expect(await select("SELECT id FROM audit WHERE action = 'runbook.adopt'")).toHaveLength(
			page.items.length
		);
	});

	it('leaves a runbook alone that has the same name', async () => {
		const input = {
			title: 'Ours',
			summary: 'Own.',
			body: '### 1. Look (check)',
			engines: ['postgresql' as const],
			symptoms: ['hash-spill' as const],
			reviewEveryDays: 90
		};
		const meta = {
			slug: 'keep-a-bitmap-exact',
			state: 'draft' as const,
			ownerId: null,
			reviewDue: null,
			now: '2026-01-01T00:00:00.000Z',
			createdById: null
		};
		await write((transaction) => insertRunbook(meta, input, transaction));
		await runbooks.adoptContent();
		expect(valueOf(await runbooks.read(nobody, 'keep-a-bitmap-exact')).title).toBe('Ours');
	});
});

describe('list', () => {
	it('refuses a cursor that is not its own', async () => {
		const outcome = await runbooks.list(nobody, { cursor: 'abc' });
		expect(outcome).toMatchObject({ ok: false, problem: { code: 'invalid' } });
	});

	it('narrows by state, engine, symptom and words, wildcards taken as they stand', async () => {
		await runbooks.adoptContent();
		const titles = async (filter: Parameters<typeof runbooks.list>[1]) =>
			valueOf(await runbooks.list(nobody, filter)).items.map(({ title }) => title);
		expect(await titles({ state: 'draft' })).toEqual([]);
		expect(await titles({ engine: 'mariadb' })).toEqual([]);
		expect(await titles({ symptom: 'jit-dominates' })).toEqual([
			'Stop just-in-time compilation for short queries'
		]);
		expect(await titles({ q: 'VISIBILITY map' })).toContain('Vacuum for the visibility map');
		expect(await titles({ q: '100% of_nothing' })).toEqual([]);
		expect(await titles({ symptom: 'jit-dominates', q: '%' })).toEqual([]);
	});

	it('pages by title without losing or repeating one', async () => {
		await runbooks.adoptContent();
		const all = valueOf(await runbooks.list(nobody));
		const seen: string[] = [];
		let cursor: string | undefined;
		do {
			const page = valueOf(
				await runbooks.list(nobody, { limit: 4, ...(cursor === undefined ? {} : { cursor }) })
			);
			seen.push(...page.items.map(({ slug }) => slug));
			expect(page.total).toBe(all.total);
			cursor = page.next ?? undefined;
		} while (cursor !== undefined);
		expect(seen).toEqual(all.items.map(({ slug }) => slug));
	});
});

describe('read', () => {
	it('knows no runbook of another name', async () => {
		expect(await runbooks.read(nobody, 'nothing')).toMatchObject({
			ok: false,
			problem: { code: 'not_found' }
		});
	});

	it('gives every statement its caution', async () => {
		await runbooks.adoptContent();
		const runbook = valueOf(await runbooks.read(nobody, 'add-an-index-without-stopping-writes'));
		const kinds = runbook.steps.flatMap(({ statements }) => statements.map(({ kind }) => kind));
		expect(kinds).toContain('create-index-concurrently');
		expect(kinds).toContain('drop-index-concurrently');
		expect(runbook.steps.map(({ number }) => number)).toEqual([1, 2, 3, 4, 5, 6]);
	});

	it('counts how attempts with it ended, those under way left out', async () => {
		await runbooks.adoptContent();
		const slug = 'refresh-statistics-of-one-table';
		for (const outcome of ['worked', 'worked', 'partly', 'made-worse', null] as const)
			await tryRunbook(slug, outcome);
		expect(valueOf(await runbooks.read(nobody, slug)).record).toEqual({
			worked: 2,
			partly: 1,
			noEffect: 0,
			madeWorse: 1
		});
		expect(valueOf(await runbooks.read(nobody, 'keep-a-bitmap-exact')).record.worked).toBe(0);
	});
});

describe('readPage', () => {
	it('renders text, cautions and the rest, and lists the attempts', async () => {
		await runbooks.adoptContent();
		const slug = 'refresh-statistics-of-one-table';
		await tryRunbook(slug, 'worked');
		const page = valueOf(await runbooks.readPage(nobody, slug));
		expect(page.introductionHtml).toContain('<h2>Before you use this on production</h2>');
		expect(page.steps[0]?.cautionHtml).toContain('carries the statement out');
		expect(page.steps[2]?.statements[0]?.kind).toBe('analyze');
		expect(page.remarksHtml).toContain('<h3>So that it does not come back</h3>');
		expect(page.attempts).toMatchObject([{ incidentTitle: 'Invoice preview slow', outcome: 'worked' }]);
	});
});

describe('forSymptoms', () => {
	it('answers nothing for no symptom, another engine or a draft', async () => {
		await runbooks.adoptContent();
		expect(valueOf(await runbooks.forSymptoms(nobody, [], 'postgresql'))).toEqual([]);
		expect(valueOf(await runbooks.forSymptoms(nobody, ['hash-spill'], 'mariadb'))).toEqual([]);
		expect(valueOf(await runbooks.forSymptoms(nobody, ['told-in-words'], 'postgresql'))).toEqual([]);
	});

	it('puts first what serves more of the symptoms, then what worked more surely', async () => {
		await runbooks.adoptContent();
		const slugs = async () =>
			valueOf(await runbooks.forSymptoms(nobody, ['hash-spill', 'skewed-hash'], 'postgresql')).map(
				({ slug }) => slug
			);
		expect((await slugs())[0]).toBe('split-a-hot-key-out-of-a-hash-join');
		await tryRunbook('put-the-smaller-side-into-the-hash', 'worked');
		expect((await slugs())[1]).toBe('put-the-smaller-side-into-the-hash');
	});
});
