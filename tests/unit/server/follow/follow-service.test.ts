import { describe, expect, it } from 'vitest';
import type { Outcome } from '$lib/domain/problem';
import { RunbookModel } from '$lib/server/db/models/runbook';
import { RunbookRevisionModel } from '$lib/server/db/models/runbook-revision';
import { write } from '$lib/server/db/transaction';
import * as evidence from '$lib/server/evidence/evidence-service';
import * as follow from '$lib/server/follow/follow-service';
import * as attempts from '$lib/server/incidents/attempts-service';
import * as incidents from '$lib/server/incidents/incidents-service';
import { insertRunbook } from '$lib/server/runbooks/runbook-write-store';
import { readSide } from '../../../fixtures/compare';
import { withDatabase } from '../../../fixtures/database';
import { makeIncident } from '../../../fixtures/factories/incident';
import { makePerson } from '../../../fixtures/factories/person';
import { listDataFiles, spool } from '../../../fixtures/spool';

withDatabase();

const SLUG = 'build-an-index';
const PAIR = 'statistics-taken-swap-the-build-side';
const STEPS = `## Before you use this on production

The manual first.

### 1. Is it there? (check)

\`\`\`sql
select 1
\`\`\`

### 2. Build it (action)

\`\`\`sql
create index concurrently yard_move_at on yard_move (moved_at)
\`\`\`

### 3. Take it away (undo)

Only when it did harm.
`;

function valueOf<T>(outcome: Outcome<T>): T {
	if (!outcome.ok) throw new Error(outcome.problem.detail);
	return outcome.value;
}

async function begin() {
	const { actor } = await makePerson({ role: 'responder' });
	const incident = await makeIncident({ ownerId: actor.personId });
	await write((transaction) =>
		insertRunbook(
			{
				slug: SLUG,
				state: 'published',
				ownerId: null,
				reviewDue: null,
				now: '2026-11-01T00:00:00.000Z',
				createdById: null
			},
			{
				title: 'Build an index',
				summary: 'Beside the running work.',
				body: STEPS,
				engines: ['postgresql'],
				symptoms: ['filter-discards-most'],
				reviewEveryDays: 180
			},
			transaction
		)
	);
	const attempt = valueOf(await attempts.start(actor, incident, { runbook: SLUG }));
	return { actor, incident, place: { slug: SLUG, incident, attempt: attempt.id } };
}

describe('read', () => {
	it('knows no attempt under a runbook that it does not follow', async () => {
		const { actor, place } = await begin();
		const outcome = await follow.read(actor, { ...place, slug: 'another' }, null);
		expect(outcome).toMatchObject({ ok: false, problem: { code: 'not_found' } });
	});

	it('shows the first step that is not done, or the one that is asked for', async () => {
		const { actor, place } = await begin();
		expect(valueOf(await follow.read(actor, place, null)).current?.number).toBe(1);
		expect(valueOf(await follow.read(actor, place, 3)).current?.number).toBe(3);
	});

	it('asks for the caution and its prechecks before a heavy statement, for nothing before a read', async () => {
		const { actor, place } = await begin();
		expect(valueOf(await follow.read(actor, place, 1)).checks).toEqual([]);
		expect(valueOf(await follow.read(actor, place, 2)).checks.length).toBeGreaterThan(1);
	});

	it('goes on by the revision that the attempt began with', async () => {
		const { actor, place } = await begin();
		await write(async () => {
			const runbook = await RunbookModel.findOne({ where: { slug: SLUG }, rejectOnEmpty: true });
			await RunbookRevisionModel.create({
				runbookId: runbook.id,
				revision: 2,
				title: 'Build an index',
				summary: 'Shorter.',
				body: '### 1. Ask somebody (check)',
				engines: '["postgresql"]',
				symptoms: '["filter-discards-most"]',
				reviewEveryDays: 180,
				createdAt: '2026-11-02T00:00:00.000Z',
				createdById: null
			});
			await runbook.update({ revision: 2, publishedRevision: 2 });
		});
		const seen = valueOf(await follow.read(actor, place, null));
		expect(seen.steps).toHaveLength(3);
		expect(seen.current?.title).toBe('Is it there?');
	});
});

describe('tick', () => {
	it('refuses while the caution or a precheck is not ticked, and names what is missing', async () => {
		const { actor, place } = await begin();
		const outcome = await follow.tick(actor, place, { step: 2, revision: 1, checks: [0] });
		expect(outcome).toMatchObject({ ok: false, problem: { code: 'refused' } });
		const { checks } = valueOf(await follow.read(actor, place, 2));
		expect(outcome.ok ? [] : outcome.problem.reasons).toEqual(checks.slice(1));
	});

	it('refuses a tick that another one overtook', async () => {
		const { actor, place } = await begin();
		valueOf(await follow.tick(actor, place, { step: 1, revision: 1, checks: [] }));
		const late = await follow.tick(actor, place, { step: 3, revision: 1, checks: [] });
		expect(late).toMatchObject({ ok: false, problem: { code: 'stale' } });
	});

	it('refuses a reader', async () => {
		const { place } = await begin();
		const { actor: reader } = await makePerson({ role: 'reader' });
		const outcome = await follow.tick(reader, place, { step: 1, revision: 1, checks: [] });
		expect(outcome).toMatchObject({ ok: false, problem: { code: 'forbidden' } });
	});

	it('goes on to the next step', async () => {
		const { actor, place } = await begin();
		valueOf(await follow.tick(actor, place, { step: 1, revision: 1, checks: [] }));
		const { checks } = valueOf(await follow.read(actor, place, 2));
		const all = checks.map((_check, index) => index);
		valueOf(await follow.tick(actor, place, { step: 2, revision: 2, checks: all }));
		expect(valueOf(await follow.read(actor, place, null)).current?.number).toBe(3);
	});
});

describe('skip and takeBack', () => {
	it('keeps the reason until the skip is taken back', async () => {
		const { actor, place } = await begin();
		const skipped = valueOf(await follow.skip(actor, place, { step: 1, revision: 1, reason: 'known' }));
		expect(skipped.steps[0]).toMatchObject({ skipped: 'known', tickedAt: null });
		const undone = valueOf(await follow.takeBack(actor, place, { step: 1, revision: 2 }));
		expect(undone.steps[0]).toMatchObject({ skipped: null, tickedAt: null });
	});
});

describe('conclude', () => {
	it('ends the attempt with its outcome and shows no further step', async () => {
		const { actor, place } = await begin();
		const ended = valueOf(
			await follow.conclude(actor, place, { revision: 1, outcome: 'worked', note: 'Quick.', after: null })
		);
		expect(ended).toMatchObject({ outcome: 'worked', note: 'Quick.' });
		expect(ended.endedAt).not.toBeNull();
		expect(valueOf(await follow.read(actor, place, null)).current).toBeNull();
	});

	it('leaves nothing in the spool where the attempt does not follow this runbook', async () => {
		const { actor, place } = await begin();
		const given = [await spool('after.json', readSide(PAIR, 'after'))];
		const refused = await follow.conclude(
			actor,
			{ ...place, slug: 'another' },
			{ revision: 1, outcome: 'worked', note: null, after: null, given }
		);
		expect(refused).toMatchObject({ ok: false, problem: { code: 'not_found' } });
		expect(await listDataFiles('spool')).toEqual([]);
	});

	it('attaches the plan after it and compares it with the plan before', async () => {
		const { actor, incident, place } = await begin();
		const before = valueOf(
			await evidence.attach(actor, incident, [await spool('before.json', readSide(PAIR, 'before'))])
		)[0];
		valueOf(await attempts.update(actor, incident, place.attempt, 1, { before: before?.id ?? null }));
		const ended = valueOf(
			await follow.conclude(actor, place, {
				revision: 2,
				outcome: 'partly',
				note: null,
				after: null,
				given: [await spool('after.json', readSide(PAIR, 'after'))]
			})
		);
		expect(ended.comparison?.symptomsGone).toEqual(['row-underestimate', 'sort-spill']);
		const shown = valueOf(await follow.read(actor, place, null));
		expect(shown.comparison?.summary).toMatch(/^Time fell from 666 to 388 ms/);
		expect(shown.evidence.map(({ name }) => name)).toEqual(['before.json', 'after.json']);
	});
});

describe('handOver', () => {
	it('writes nothing where the incident changed meanwhile', async () => {
		const { actor, incident, place } = await begin();
		const before = valueOf(await incidents.read(actor, incident));
		const outcome = await follow.handOver(actor, place, {
			incidentRevision: before.revision + 7,
			note: 'Bed.',
			to: null
		});
		expect(outcome).toMatchObject({ ok: false, problem: { code: 'stale' } });
		const after = valueOf(await incidents.read(actor, incident));
		expect(after.owner).not.toBeNull();
		expect(after.entries).toHaveLength(before.entries.length);
	});

	it('frees the incident, tells the log where it stopped, and leaves the attempt under way', async () => {
		const { actor, incident, place } = await begin();
		valueOf(await follow.tick(actor, place, { step: 1, revision: 1, checks: [] }));
		const { revision } = valueOf(await incidents.read(actor, incident));
		valueOf(
			await follow.handOver(actor, place, {
				incidentRevision: revision,
				note: 'Step 2 waits for disk.',
				to: null
			})
		);
		const after = valueOf(await incidents.read(actor, incident));
		expect(after.owner).toBeNull();
		expect(after.entries.map((entry) => entry.text).join('\n')).toContain('after step 1 of 3');
		expect(after.entries.map((entry) => entry.text).join('\n')).toContain('Step 2 waits for disk.');
		expect(after.attempts[0]?.endedAt).toBeNull();
	});

	it('puts a colleague on it who is named', async () => {
		const { actor, incident, place } = await begin();
		const { id: colleague } = await makePerson({ name: 'Tomas Rehl' });
		expect(valueOf(await follow.read(actor, place, null)).others.map(({ id }) => id)).toEqual([colleague]);
		const { revision } = valueOf(await incidents.read(actor, incident));
		valueOf(
			await follow.handOver(actor, place, { incidentRevision: revision, note: 'Yours.', to: colleague })
		);
		expect(valueOf(await incidents.read(actor, incident)).owner?.id).toBe(colleague);
	});
});
