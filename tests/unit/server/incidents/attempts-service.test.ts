import { describe, expect, it } from 'vitest';
import type { Attempt } from '$lib/domain/incident/attempt';
import type { AttemptInput } from '$lib/domain/incident/incident-input';
import type { Actor } from '$lib/domain/person/person';
import { execute, select } from '$lib/server/db/query';
import * as evidence from '$lib/server/evidence/evidence-service';
import * as attempts from '$lib/server/incidents/attempts-service';
import * as incidents from '$lib/server/incidents/incidents-service';
import * as entries from '$lib/server/incidents/entries-service';
import * as runbooks from '$lib/server/runbooks/runbooks-service';
import { readSide } from '../../../fixtures/compare';
import { withDatabase } from '../../../fixtures/database';
import { makeIncident } from '../../../fixtures/factories/incident';
import { makeActor } from '../../../fixtures/factories/person';
import { spool, spoolFixture } from '../../../fixtures/spool';

withDatabase();

const RUNBOOK = 'keep-a-bitmap-exact';

async function start(actor: Actor, number: number, input: AttemptInput): Promise<Attempt> {
	const started = await attempts.start(actor, number, input);
	if (!started.ok) throw new Error(started.problem.detail);
	return started.value;
}

async function attachPlan(actor: Actor, number: number): Promise<number> {
	const attached = await evidence.attach(actor, number, [await spoolFixture('plan.json')]);
	return (attached.ok ? attached.value[0]?.id : undefined) ?? 0;
}

const PAIR = 'statistics-taken-swap-the-build-side';

/** The plans of a real pair; the one after is named by an attempt only when the test does so. */
async function attachPair(actor: Actor, number: number): Promise<{ before: number; after: number }> {
	const attached = await evidence.attach(actor, number, [
		await spool('before.json', readSide(PAIR, 'before')),
		await spool('after.json', readSide(PAIR, 'after'))
	]);
	const [before, after] = attached.ok ? attached.value : [];
	return { before: before?.id ?? 0, after: after?.id ?? 0 };
}

async function symptomsOf(actor: Actor, number: number): Promise<string[]> {
	const read = await incidents.read(actor, number);
	return read.ok ? read.value.symptoms.toSorted() : [];
}

async function logOf(actor: Actor, number: number): Promise<string[]> {
	const page = await entries.list(actor, number);
	return page.ok ? page.value.items.map(({ kind, text }) => `${kind}: ${text}`) : [];
}

describe('start', () => {
	it('refuses a reader', async () => {
		const refused = await attempts.start(await makeActor('reader'), await makeIncident(), {
			title: 'Analyze'
		});
		expect(refused).toMatchObject({ problem: { code: 'forbidden' } });
	});

	it('asks for a runbook or a title, and for a runbook that there is', async () => {
		const actor = await makeActor('responder');
		const number = await makeIncident();
		expect(await attempts.start(actor, number, {})).toMatchObject({
			problem: { code: 'invalid', errors: [{ field: 'title' }] }
		});
		expect(await attempts.start(actor, number, { runbook: 'nothing' })).toMatchObject({
			problem: { code: 'invalid', errors: [{ field: 'runbook' }] }
		});
	});

	it('refuses a runbook that is not published', async () => {
		await runbooks.adoptContent();
		await execute("UPDATE runbooks SET state = 'retired' WHERE slug = :slug", { slug: RUNBOOK });
		const refused = await attempts.start(await makeActor('responder'), await makeIncident(), {
			runbook: RUNBOOK
		});
		expect(refused).toMatchObject({ problem: { code: 'refused' } });
		expect(await select('SELECT id FROM attempts')).toEqual([]);
	});

	it('refuses evidence of another incident', async () => {
		const actor = await makeActor('responder');
		const foreign = await attachPlan(actor, await makeIncident());
		const refused = await attempts.start(actor, await makeIncident(), { title: 'Analyze', before: foreign });
		expect(refused).toMatchObject({ problem: { code: 'invalid', errors: [{ field: 'before' }] } });
	});

	it('takes the newest plan for before, unless another one or none is named', async () => {
		const actor = await makeActor('responder');
		const number = await makeIncident();
		expect((await start(actor, number, { title: 'One' })).before).toBeNull();
		const { before, after } = await attachPair(actor, number);
		await evidence.attach(actor, number, [await spool('night.txt', 'The batch was late.')]);
		expect((await start(actor, number, { title: 'Two' })).before).toBe(after);
		expect((await start(actor, number, { title: 'Three', before })).before).toBe(before);
		expect((await start(actor, number, { title: 'Four', before: null })).before).toBeNull();
	});

	it("takes over the runbook's title, revision and steps, and says so in the log", async () => {
		await runbooks.adoptContent();
		const actor = await makeActor('responder');
		const number = await makeIncident();
		const attempt = await start(actor, number, { runbook: RUNBOOK });
		const runbook = await runbooks.read(actor, RUNBOOK);
		if (!runbook.ok) throw new Error(runbook.problem.detail);
		expect(attempt).toMatchObject({
			runbook: RUNBOOK,
			runbookRevision: runbook.value.revision,
			title: runbook.value.title,
			outcome: null,
			endedAt: null
		});
		expect(attempt.steps.map(({ number: step }) => step)).toEqual(
			runbook.value.steps.map((step) => step.number)
		);
		expect(await logOf(actor, number)).toEqual([expect.stringMatching(/^attempt: Started: /)]);
	});
});

describe('update', () => {
	it('refuses a stale edit and hands over what stands there', async () => {
		const actor = await makeActor('responder');
		const number = await makeIncident();
		const { id } = await start(actor, number, { title: 'Analyze port_call' });
		await attempts.update(actor, number, id, 1, { note: 'One' });
		expect(await attempts.update(actor, number, id, 1, { note: 'Two' })).toMatchObject({
			problem: { code: 'stale', current: { note: 'One', revision: 2 } }
		});
	});

	it('refuses evidence of another incident for after', async () => {
		const actor = await makeActor('responder');
		const foreign = await attachPlan(actor, await makeIncident());
		const number = await makeIncident();
		const { id } = await start(actor, number, { title: 'Analyze port_call' });
		expect(await attempts.update(actor, number, id, 1, { after: foreign })).toMatchObject({
			problem: { code: 'invalid', errors: [{ field: 'after' }] }
		});
	});

	it('ticks and skips single steps and leaves the others', async () => {
		await runbooks.adoptContent();
		const actor = await makeActor('responder');
		const number = await makeIncident();
		const { id } = await start(actor, number, { runbook: RUNBOOK });
		await attempts.update(actor, number, id, 1, { steps: [{ number: 1, ticked: true }] });
		const second = await attempts.update(actor, number, id, 2, {
			steps: [{ number: 2, skipped: 'There is no replica.' }]
		});
		if (!second.ok) throw new Error(second.problem.detail);
		expect(second.value.steps.slice(0, 3)).toMatchObject([
			{ number: 1, by: { id: actor.personId }, skipped: null },
			{ number: 2, tickedAt: null, by: { id: actor.personId }, skipped: 'There is no replica.' },
			{ number: 3, tickedAt: null, by: null, skipped: null }
		]);
		expect(second.value.steps[0]?.tickedAt).toMatch(/Z$/);
	});

	it('records the outcome with an end, a line in the log, and the evidence of the incident', async () => {
		const actor = await makeActor('responder');
		const number = await makeIncident();
		const before = await attachPlan(actor, number);
		const { id } = await start(actor, number, { title: 'Analyze port_call', before });
		const ended = await attempts.update(actor, number, id, 1, { outcome: 'worked', after: before });
		expect(ended).toMatchObject({
			ok: true,
			value: { outcome: 'worked', before, after: before, revision: 2 }
		});
		expect(ended.ok && ended.value.endedAt).toMatch(/Z$/);
		expect((await logOf(actor, number)).at(-1)).toBe('attempt: Analyze port\\_call: it worked.');
	});

	it('holds no comparison while one side is missing or no plan', async () => {
		const actor = await makeActor('responder');
		const number = await makeIncident();
		const { before } = await attachPair(actor, number);
		const { id, comparison } = await start(actor, number, { title: 'Analyze invoice_line', before });
		expect(comparison).toBeNull();
		const attached = await evidence.attach(actor, number, [await spool('night.txt', 'It was quick again.')]);
		const text = (attached.ok ? attached.value[0]?.id : undefined) ?? 0;
		expect(await attempts.update(actor, number, id, 1, { after: text })).toMatchObject({
			value: { after: text, comparison: null }
		});
	});

	it('compares the plans before and after, wherever the attempt is read', async () => {
		const actor = await makeActor('responder');
		const number = await makeIncident();
		const { before, after } = await attachPair(actor, number);
		const { id } = await start(actor, number, { title: 'Analyze invoice_line', before });
		const updated = await attempts.update(actor, number, id, 1, { after });
		const comparison = {
			summary: expect.stringMatching(/^Time fell from 666 to 388 ms\. The estimate is right now/),
			symptomsGone: ['row-underestimate', 'sort-spill'],
			symptomsNew: []
		};
		expect(updated).toMatchObject({ value: { comparison } });
		expect(await attempts.list(actor, number)).toMatchObject({ value: { items: [{ comparison }] } });
		expect(await incidents.read(actor, number)).toMatchObject({ value: { attempts: [{ comparison }] } });
		expect(await attempts.update(actor, number, id, 1, { note: 'late' })).toMatchObject({
			problem: { code: 'stale', current: { comparison } }
		});
	});

	it('does not count what the plan after shows as symptoms of the incident', async () => {
		const actor = await makeActor('responder');
		const number = await makeIncident();
		const attached = await evidence.attach(actor, number, [
			await spool('after.json', readSide(PAIR, 'after'))
		]);
		const after = (attached.ok ? attached.value[0]?.id : undefined) ?? 0;
		const { id } = await start(actor, number, { title: 'Analyze invoice_line' });
		expect(await symptomsOf(actor, number)).toEqual(['hash-spill']);
		await attempts.update(actor, number, id, 1, { after });
		expect(await symptomsOf(actor, number)).toEqual([]);
		await evidence.attach(actor, number, [await spoolFixture('plan.json')]);
		const withFault = await symptomsOf(actor, number);
		expect(withFault.length).toBeGreaterThan(0);
		await attempts.update(actor, number, id, 2, { after: null });
		expect(await symptomsOf(actor, number)).toEqual([...new Set([...withFault, 'hash-spill'])].toSorted());
	});

	it('draws what resembles the incident without the plan after', async () => {
		const actor = await makeActor('responder');
		const number = await makeIncident();
		const { after } = await attachPair(actor, number);
		const { id } = await start(actor, number, { title: 'Analyze invoice_line' });
		const indexed = () =>
			select('SELECT readingIds FROM precedentProfiles WHERE incidentNumber = :number', { number });
		const [before] = await indexed();
		await attempts.update(actor, number, id, 1, { after });
		expect((await indexed())[0]).not.toEqual(before);
	});

	it('counts towards the record of the runbook', async () => {
		await runbooks.adoptContent();
		const actor = await makeActor('responder');
		const number = await makeIncident();
		const { id } = await start(actor, number, { runbook: RUNBOOK });
		await attempts.update(actor, number, id, 1, { outcome: 'no-effect' });
		expect(await runbooks.read(actor, RUNBOOK)).toMatchObject({
			value: { record: { noEffect: 1, worked: 0 } }
		});
	});
});
