import { describe, expect, it } from 'vitest';
import type { Actor } from '$lib/domain/person/person';
import { SYSTEM } from '$lib/domain/person/person';
import type { Outcome } from '$lib/domain/problem';
import type { Runbook } from '$lib/domain/runbook/runbook';
import { execute, select } from '$lib/server/db/query';
import * as runbooks from '$lib/server/runbooks/runbooks-service';
import { withDatabase } from '../../../fixtures/database';
import { makeIncident } from '../../../fixtures/factories/incident';
import { makeActor, makePerson } from '../../../fixtures/factories/person';
import { makeDraft, makePublished, SOUND_BODY } from '../../../fixtures/factories/runbook';

withDatabase();

function valueOf<T>(outcome: Outcome<T>): T {
	if (!outcome.ok) throw new Error(outcome.problem.reasons?.join(' ') ?? outcome.problem.detail);
	return outcome.value;
}

function reasonsOf(outcome: Outcome<Runbook>): string[] {
	if (outcome.ok) throw new Error('It was done.');
	expect(outcome.problem.code).toBe('refused');
	return outcome.problem.reasons ?? [];
}

async function submit(author: Actor, body = SOUND_BODY): Promise<string> {
	const { slug } = await makeDraft(author, { body });
	valueOf(await runbooks.review(author, slug, { action: 'submit' }));
	return slug;
}

describe('review', () => {
	it('refuses the author as approver, a curator too', async () => {
		const author = await makeActor('curator');
		const slug = await submit(author);
		expect(reasonsOf(await runbooks.review(author, slug, { action: 'approve' }))).toEqual([
			'You wrote revision 1: somebody else has to approve it.'
		]);
	});

	it('refuses an approval that no person stands for', async () => {
		const slug = await submit(await makeActor('responder'));
		expect(reasonsOf(await runbooks.review(SYSTEM, slug, { action: 'approve' }))).toEqual([
			'An approval needs a person who stands for it.'
		]);
	});

	it('refuses readers everything, responders an approval and the draft of somebody else', async () => {
		const slug = await submit(await makeActor('responder'));
		const forbidden = { ok: false, problem: { code: 'forbidden' } };
		for (const action of ['submit', 'return', 'approve'] as const) {
			for (const role of ['reader', 'responder'] as const)
				expect(await runbooks.review(await makeActor(role), slug, { action })).toMatchObject(forbidden);
		}
	});

	it('refuses to approve another revision than the one that was read', async () => {
		const author = await makeActor('responder');
		const curator = await makeActor('curator');
		const slug = await submit(author);
		valueOf(await runbooks.update(author, slug, 1, { title: 'Changed meanwhile' }));
		valueOf(await runbooks.review(author, slug, { action: 'submit' }));
		expect(await runbooks.review(curator, slug, { action: 'approve' }, 1)).toMatchObject({
			ok: false,
			problem: { code: 'stale', current: { revision: 2, title: 'Changed meanwhile' } }
		});
	});

	it('refuses what the state does not allow', async () => {
		const author = await makeActor('responder');
		const curator = await makeActor('curator');
		const { slug } = await makeDraft(author);
		expect(reasonsOf(await runbooks.review(curator, slug, { action: 'return' }))).toEqual([
			'It is a draft: only a text in review is returned.'
		]);
		expect(reasonsOf(await runbooks.review(curator, slug, { action: 'approve' }))[0]).toContain('a draft');
	});

	it('keeps reviewer and note, and lets an approval lapse when the text is returned', async () => {
		const author = await makeActor('responder');
		const curator = await makePerson({ role: 'curator' });
		const slug = await submit(author);
		const approved = valueOf(
			await runbooks.review(curator.actor, slug, { action: 'approve', note: 'tried on a copy' })
		);
		expect(approved).toMatchObject({ state: 'in-review', reviewer: { id: curator.id } });
		const returned = valueOf(
			await runbooks.review(curator.actor, slug, { action: 'return', note: 'name the table' })
		);
		expect(returned).toMatchObject({ state: 'draft', reviewer: null });
		valueOf(await runbooks.review(author, slug, { action: 'submit' }));
		expect(reasonsOf(await runbooks.publish(curator.actor, slug))).toEqual([
			'Revision 1 is not approved yet: somebody other than its author has to.'
		]);
		const events = valueOf(await runbooks.revision(author, slug, 1)).events;
		expect(events.map(({ action, note }) => [action, note])).toEqual([
			['submit', null],
			['approve', 'tried on a copy'],
			['return', 'name the table'],
			['submit', null]
		]);
	});

	it('puts the next review off when a published one was read again', async () => {
		const { slug } = await makePublished(await makeActor('responder'));
		await execute("UPDATE runbooks SET reviewDue = '2020-01-01T00:00:00.000Z'");
		const reader = await makePerson({ role: 'curator' });
		const read = valueOf(await runbooks.review(reader.actor, slug, { action: 'approve' }));
		expect(read).toMatchObject({ state: 'published', reviewer: { id: reader.id } });
		expect(Date.parse(read.reviewDue ?? '')).toBeGreaterThan(Date.now() + 179 * 86_400_000);
	});
});

describe('publish', () => {
	it('refuses responders, their own runbook too', async () => {
		const author = await makeActor('responder');
		const slug = await submit(author);
		expect(await runbooks.publish(author, slug)).toMatchObject({
			ok: false,
			problem: { code: 'forbidden' }
		});
	});

	it('names every reason at once', async () => {
		const incident = await makeIncident();
		const body = `See [it](/incidents/${incident}), [that](/incidents/99999), [this](/runbooks/nothing),
[it](/symptoms/slow), [a step](#step-7) and [a place](/symptoms/hash-spill).

### 1. Build (action)

\`\`\`sql
create index i on yard_move (depot_id);
select tidy_up();
\`\`\`
`;
		const { slug } = await makeDraft(await makeActor('responder'), { body });
		const reasons = reasonsOf(await runbooks.publish(await makeActor('curator'), slug));
		expect(reasons).toEqual([
			'It is a draft: submit it for review first.',
			'The section "## Before you use this on production" is missing before the first step.',
			'Step 1 has a statement that is not understood: a curator has to write its caution.',
			'Step 1 changes production, and no check stands before it.',
			'Step 1 changes production, and no verification stands after it.',
			'It changes production, and there is no way back: add an undo step.',
			'The link to /incidents/99999 leads nowhere: there is no incident 99999.',
			'The link to /runbooks/nothing leads nowhere: there is no runbook nothing.',
			'The link to /symptoms/slow leads nowhere: there is no symptom slow.',
			'The link to #step-7 leads nowhere: there is no step 7.'
		]);
	});

	it('refuses a link to a retired runbook', async () => {
		const author = await makeActor('responder');
		const curator = await makeActor('curator');
		const { slug: old } = await makePublished(author, { title: 'Old way' });
		valueOf(await runbooks.retire(curator, old));
		const slug = await submit(author, `${SOUND_BODY}\n## Remarks\n\n[Before](/runbooks/old-way#step-1).`);
		valueOf(await runbooks.review(curator, slug, { action: 'approve' }));
		expect(reasonsOf(await runbooks.publish(curator, slug))).toEqual([
			'The link to /runbooks/old-way#step-1 leads nowhere: that runbook is retired.'
		]);
	});

	it('shows the new text to readers, due for review after its interval, and says who read it', async () => {
		const author = await makeActor('responder');
		const approver = await makePerson({ role: 'curator' });
		const { slug } = await makePublished(author);
		valueOf(await runbooks.update(author, slug, 1, { title: 'Second text', reviewEveryDays: 30 }));
		valueOf(await runbooks.review(author, slug, { action: 'submit' }));
		valueOf(await runbooks.review(approver.actor, slug, { action: 'approve' }));
		const reader = await makeActor('reader');
		expect(valueOf(await runbooks.read(reader, slug)).reviewer?.id).not.toBe(approver.id);
		valueOf(await runbooks.publish(await makeActor('curator'), slug));
		const shown = valueOf(await runbooks.read(reader, slug));
		expect(shown).toMatchObject({
			title: 'Second text',
			state: 'published',
			revision: 2,
			reviewer: { id: approver.id }
		});
		expect(Date.parse(shown.reviewDue ?? '')).toBeLessThan(Date.now() + 31 * 86_400_000);
		expect(valueOf(await runbooks.revisions(reader, slug)).items.map(({ state }) => state)).toEqual([
			'published',
			null
		]);
	});

	it('notes every move in the audit trail', async () => {
		await makePublished(await makeActor('responder'));
		const rows = await select<{ action: string }>('SELECT action FROM audit ORDER BY id');
		expect(rows.map(({ action }) => action)).toEqual([
			'runbook.create',
			'runbook.submit',
			'runbook.approve',
			'runbook.publish'
		]);
	});
});

describe('retire', () => {
	it('refuses a draft, which nobody follows', async () => {
		const { slug } = await makeDraft(await makeActor('responder'));
		expect(reasonsOf(await runbooks.retire(await makeActor('curator'), slug))).toEqual([
			'It is a draft: only a published one is retired.'
		]);
	});

	it('takes it out of use with its newer draft, and a curator takes it up again as a draft', async () => {
		const author = await makeActor('responder');
		const curator = await makeActor('curator');
		const { slug } = await makePublished(author);
		valueOf(await runbooks.update(author, slug, 1, { title: 'Newer' }));
		expect(valueOf(await runbooks.retire(curator, slug, 'replaced'))).toMatchObject({
			state: 'retired',
			reviewDue: null
		});
		expect(valueOf(await runbooks.forSymptoms(author, ['filter-discards-most'], 'postgresql'))).toEqual([]);
		expect(valueOf(await runbooks.revisions(author, slug)).items.map(({ state }) => state)).toEqual([
			null,
			'retired'
		]);
		valueOf(await runbooks.update(curator, slug, 2, { title: 'Once more' }));
		expect(valueOf(await runbooks.read(author, slug))).toMatchObject({ state: 'draft', title: 'Once more' });
	});
});

describe('compare', () => {
	it('refuses a revision that there is not', async () => {
		const author = await makeActor('responder');
		const { slug } = await makeDraft(author);
		expect(await runbooks.compare(author, slug, { from: 1, to: 2 })).toMatchObject({
			ok: false,
			problem: { code: 'not_found', detail: `The runbook ${slug} has no revision 2.` }
		});
	});

	it('shows a caution that was raised, and the words that changed', async () => {
		const author = await makeActor('responder');
		const { slug } = await makeDraft(author);
		const body = SOUND_BODY.replace('create index concurrently', 'create index');
		valueOf(await runbooks.update(author, slug, 1, { body }));
		const comparison = valueOf(await runbooks.compare(author, slug, { from: 1, to: 2 }));
		expect(comparison.cautions).toMatchObject([
			{ step: 2, title: 'Build it', before: { level: 2 }, after: { level: 3 } }
		]);
		const removed = comparison.body.filter(({ change }) => change === 'removed');
		expect(removed.map(({ text }) => text.trim())).toEqual(['concurrently']);
	});
});

describe('readWork', () => {
	it('offers each person what they may do with the newest text, and nothing else', async () => {
		const author = await makeActor('responder');
		const curator = await makeActor('curator');
		const slug = await submit(author);
		const may = async (actor: Actor) =>
			Object.entries(valueOf(await runbooks.readWork(actor, slug)).may).flatMap(([name, allowed]) =>
				allowed ? [name] : []
			);
		expect(await may(await makeActor('reader'))).toEqual([]);
		expect(await may(await makeActor('responder'))).toEqual([]);
		expect(await may(author)).toEqual(['edit', 'return']);
		expect(await may(curator)).toEqual(['edit', 'return', 'approve', 'publish']);
	});
});

describe('preview', () => {
	it('refuses a reader', async () => {
		const outcome = await runbooks.preview(await makeActor('reader'), null, { body: '', engines: [] });
		expect(outcome).toMatchObject({ ok: false, problem: { code: 'forbidden' } });
	});

	it('draws an unsaved text with its cautions and open reasons, scripts as the text that they are', async () => {
		const body = `<script>alert(1)</script>\n\n### 1. Empty it (action)\n\n\`\`\`sql\ntruncate yard_move\n\`\`\``;
		const drawn = valueOf(
			await runbooks.preview(await makeActor('responder'), null, { body, engines: ['postgresql'] })
		);
		expect(drawn.introductionHtml).not.toContain('<script');
		expect(drawn.steps[0]?.statements[0]).toMatchObject({ kind: 'truncate', level: 3 });
		expect(drawn.reasons).toContain('It changes production, and there is no way back: add an undo step.');
		expect(await select('SELECT id FROM runbooks')).toEqual([]);
	});
});
