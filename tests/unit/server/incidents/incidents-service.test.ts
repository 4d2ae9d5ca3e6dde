import { describe, expect, it } from 'vitest';
import { incidentFilter } from '$lib/domain/incident/incident-filter';
import type { Incident } from '$lib/domain/incident/incident';
import type { IncidentInput } from '$lib/domain/incident/incident-input';
import type { Actor } from '$lib/domain/person/person';
import { select } from '$lib/server/db/query';
import * as incidents from '$lib/server/incidents/incidents-service';
import { withDatabase } from '../../../fixtures/database';
import { makeActor, makePerson } from '../../../fixtures/factories/person';

withDatabase();

async function log(actor: Actor, input: Partial<IncidentInput> = {}): Promise<Incident> {
	const logged = await incidents.create(actor, { title: 'Berth report is slow', ...input });
	if (!logged.ok) throw new Error(logged.problem.detail);
	return logged.value;
}

async function listNumbers(actor: Actor, query: Record<string, unknown> = {}): Promise<number[]> {
	const page = await incidents.list(actor, incidentFilter.parse(query));
	if (!page.ok) throw new Error(page.problem.detail);
	return page.value.items.map((incident) => incident.number);
}

describe('create', () => {
	it('refuses a reader', async () => {
		const refused = await incidents.create(await makeActor('reader'), { title: 'Slow' });
		expect(refused).toMatchObject({ ok: false, problem: { code: 'forbidden' } });
		expect(await select('SELECT number FROM incidents')).toEqual([]);
	});

	it('refuses an owner who may not sign in any more, and logs nothing', async () => {
		const gone = await makePerson({ deactivatedAt: '2026-01-01T00:00:00.000Z' });
		const refused = await incidents.create(await makeActor('responder'), { title: 'Slow', owner: gone.id });
		expect(refused).toMatchObject({ ok: false, problem: { code: 'invalid', errors: [{ field: 'owner' }] } });
		expect(await select('SELECT number FROM incidents')).toEqual([]);
	});

	it('leaves calling it reviewed to curators', async () => {
		const input: IncidentInput = {
			title: 'Slow',
			state: 'reviewed',
			cause: 'not found',
			resolution: 'It went away.'
		};
		const refused = await incidents.create(await makeActor('responder'), input);
		expect(refused).toMatchObject({ ok: false, problem: { code: 'forbidden' } });
		const logged = await incidents.create(await makeActor('curator'), input);
		expect(logged).toMatchObject({ ok: true, value: { state: 'reviewed' } });
	});

	it('keeps a title with markup as it was written', async () => {
		const title = '<img src=x onerror="alert(1)"> **slow**';
		expect((await log(await makeActor('responder'), { title })).title).toBe(title);
	});

	it('answers who logged it, when, with an audit line', async () => {
		const actor = await makeActor('responder');
		const incident = await log(actor);
		expect(incident).toMatchObject({
			revision: 1,
			origin: 'person',
			createdBy: { id: actor.personId, name: actor.name },
			owner: null,
			symptoms: [],
			evidence: [],
			entries: [],
			attempts: [],
			followUps: []
		});
		expect(await select('SELECT action, subject FROM audit')).toEqual([
			{ action: 'incident.create', subject: `incident:${incident.number}` }
		]);
	});
});

describe('update', () => {
	it('refuses a stale edit, hands over what stands there and overwrites nothing', async () => {
		const actor = await makeActor('responder');
		const { number } = await log(actor);
		await incidents.update(actor, number, 1, { narrative: 'Spills since 02:10.' });
		const refused = await incidents.update(actor, number, 1, { narrative: 'Nothing to see.' });
		expect(refused).toMatchObject({
			ok: false,
			problem: { code: 'stale', current: { revision: 2, narrative: 'Spills since 02:10.' } }
		});
	});

	it('lets one of two edits on the same revision win, and tells the other', async () => {
		const actor = await makeActor('responder');
		const { number } = await log(actor);
		const outcomes = await Promise.all([
			incidents.update(actor, number, 1, { title: 'One' }),
			incidents.update(actor, number, 1, { title: 'Two' })
		]);
		expect(outcomes.map((outcome) => (outcome.ok ? 'ok' : outcome.problem.code)).sort()).toEqual([
			'ok',
			'stale'
		]);
	});

	it('answers not_found for a number that was never given', async () => {
		const refused = await incidents.update(await makeActor('responder'), 9, 1, { title: 'Slow' });
		expect(refused).toMatchObject({ ok: false, problem: { code: 'not_found' } });
	});

	it('refuses a move with every reason, and writes nothing of the edit', async () => {
		const actor = await makeActor('responder');
		const { number } = await log(actor);
		const refused = await incidents.update(actor, number, 1, { state: 'reviewed', title: 'Closed' });
		expect(refused.ok ? [] : refused.problem.reasons).toHaveLength(3);
		const read = await incidents.read(actor, number);
		expect(read).toMatchObject({
			ok: true,
			value: { title: 'Berth report is slow', revision: 1, entries: [] }
		});
	});

	it('leaves reviewing to curators', async () => {
		const actor = await makeActor('responder');
		const { number } = await log(actor, {
			state: 'resolved',
			cause: 'not found',
			resolution: 'It went away.'
		});
		const refused = await incidents.update(actor, number, 1, { state: 'reviewed' });
		expect(refused).toMatchObject({ ok: false, problem: { code: 'forbidden' } });
		const reviewed = await incidents.update(await makeActor('curator'), number, 1, { state: 'reviewed' });
		expect(reviewed).toMatchObject({ ok: true, value: { state: 'reviewed', revision: 2 } });
	});

	it('keeps what an edit replaced, under the revision that it had', async () => {
		const actor = await makeActor('responder');
		const { number } = await log(actor, { service: 'berth-planner', severity: 2 });
		await incidents.update(actor, number, 1, { service: null });
		expect(await select('SELECT revision, changedById, before FROM incidentRevisions')).toEqual([
			{ revision: 1, changedById: actor.personId, before: '{"service":"berth-planner"}' }
		]);
	});

	it('makes no revision where nothing is different', async () => {
		const actor = await makeActor('responder');
		const { number } = await log(actor);
		const same = await incidents.update(actor, number, 1, { title: 'Berth report is slow' });
		expect(same).toMatchObject({ ok: true, value: { revision: 1 } });
	});

	it('writes into the log that it was taken, moved, and why it is open again', async () => {
		const { actor, id, name } = await makePerson({ name: 'Ines *Okafor*' });
		const { number } = await log(actor);
		await incidents.update(actor, number, 1, { owner: id });
		await incidents.update(actor, number, 2, { state: 'contained' });
		const back = await incidents.update(actor, number, 3, { state: 'open', reason: 'Spilled again.' });
		if (!back.ok) throw new Error(back.problem.detail);
		expect(back.value).toMatchObject({ state: 'open', containedAt: null, owner: { id, name } });
		expect(back.value.entries.map(({ kind, text }) => [kind, text])).toEqual([
			['state', 'Taken by Ines \\*Okafor\\*.'],
			['state', 'Contained.'],
			['state', 'Open again (it was contained). Spilled again.']
		]);
	});
});

describe('list', () => {
	it('refuses the cursor of another order', async () => {
		const actor = await makeActor('reader');
		const responder = await makeActor('responder');
		await log(responder);
		await log(responder);
		const first = await incidents.list(actor, incidentFilter.parse({ limit: 1 }));
		const cursor = first.ok ? first.value.next : null;
		const refused = await incidents.list(actor, incidentFilter.parse({ limit: 1, sort: 'number', cursor }));
		expect(refused).toMatchObject({ ok: false, problem: { code: 'invalid', errors: [{ field: 'cursor' }] } });
	});

	it.each(['rubbish', 'W10', 'eyJhIjoxfQ', ''])('refuses %j, which is no cursor', async (cursor) => {
		const refused = await incidents.list(await makeActor('reader'), incidentFilter.parse({ cursor }));
		expect(refused).toMatchObject({ ok: false, problem: { code: 'invalid' } });
	});

	it('walks every order page by page, shows each once, and counts them all', async () => {
		const actor = await makeActor('responder');
		for (let i = 0; i < 7; i++)
			await log(actor, {
				severity: (i % 3) + 1,
				startedAt: i === 3 ? null : `2026-03-0${(i % 2) + 1}T00:00:00.000Z`
			});
		for (const sort of [
			'-startedAt',
			'startedAt',
			'severity',
			'-severity',
			'-updatedAt',
			'number',
			'-number'
		]) {
			const whole = await listNumbers(actor, { sort });
			const walked: number[] = [];
			let cursor: string | null = null;
			do {
				const page = await incidents.list(
					actor,
					incidentFilter.parse({ sort, limit: 2, ...(cursor === null ? {} : { cursor }) })
				);
				if (!page.ok) throw new Error(page.problem.detail);
				expect(page.value.total).toBe(7);
				walked.push(...page.value.items.map((incident) => incident.number));
				cursor = page.value.next;
			} while (cursor !== null);
			expect(walked).toEqual(whole);
			expect(new Set(walked).size).toBe(7);
		}
	});

	it('neither repeats nor skips when incidents are added between two pages', async () => {
		const actor = await makeActor('responder');
		for (let i = 0; i < 4; i++) await log(actor, { startedAt: `2026-03-0${i + 1}T00:00:00.000Z` });
		const first = await incidents.list(actor, incidentFilter.parse({ limit: 2 }));
		const cursor = first.ok ? first.value.next : null;
		await log(actor, { startedAt: '2026-03-09T00:00:00.000Z' });
		expect(await listNumbers(actor, { limit: 2, cursor })).toEqual([2, 1]);
	});

	it('narrows by every filter, several values widening one', async () => {
		const { actor, id } = await makePerson();
		const day = (n: number) => `2026-03-0${n}T12:00:00.000Z`;
		await log(actor, { startedAt: day(1), service: 'berth-planner', severity: 1, engine: 'postgresql' });
		await log(actor, { startedAt: day(2), service: 'invoicing', severity: 2, engine: 'mariadb', owner: id });
		await log(actor, {
			startedAt: day(3),
			service: 'customs',
			state: 'resolved',
			cause: 'not found',
			resolution: 'It went away.',
			resolvedAt: day(4)
		});
		expect(await listNumbers(actor, { state: ['resolved'] })).toEqual([3]);
		expect(await listNumbers(actor, { severity: [1, 2] })).toEqual([2, 1]);
		expect(await listNumbers(actor, { service: ['invoicing', 'customs'] })).toEqual([3, 2]);
		expect(await listNumbers(actor, { engine: ['mariadb'] })).toEqual([2]);
		expect(await listNumbers(actor, { owner: 'me' })).toEqual([2]);
		expect(await listNumbers(actor, { owner: String(id) })).toEqual([2]);
		expect(await listNumbers(actor, { owner: 'none' })).toEqual([3, 1]);
		expect(await listNumbers(actor, { from: '2026-03-02', to: '2026-03-02' })).toEqual([2]);
		expect(await listNumbers(actor, { symptom: ['hash-spill'] })).toEqual([]);
	});

	it('looks words up in title, narrative and log, the last one perhaps unfinished', async () => {
		const actor = await makeActor('responder');
		await log(actor, { title: 'Month-end invoicing is slow' });
		await log(actor, { title: 'Berth report', narrative: 'The hash join writes temporary files.' });
		expect(await listNumbers(actor, { q: 'invoic' })).toEqual([1]);
		expect(await listNumbers(actor, { q: 'temporary hash' })).toEqual([2]);
		expect(await listNumbers(actor, { q: '#2' })).toEqual([2]);
		expect(await listNumbers(actor, { q: 'nothing like it' })).toEqual([]);
	});

	it.each(['"', "'", '*', 'a"b OR c', 'NEAR(', '-', ':', '()', 'title:x', '\\', '%'])(
		'answers %j without failing',
		async (q) => {
			const actor = await makeActor('responder');
			await log(actor);
			await expect(incidents.list(actor, incidentFilter.parse({ q }))).resolves.toMatchObject({ ok: true });
		}
	);
});
