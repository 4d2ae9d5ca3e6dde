import { describe, expect, it } from 'vitest';
import { select } from '$lib/server/db/query';
import * as runbooks from '$lib/server/runbooks/runbooks-service';
import * as search from '$lib/server/search/search-service';
import { withDatabase } from '../../../fixtures/database';
import { makeActor, makePerson } from '../../../fixtures/factories/person';
import { makeDraft, makePublished, runbookInputOf } from '../../../fixtures/factories/runbook';

withDatabase();

function valueOf<T>(outcome: { ok: true; value: T } | { ok: false; problem: { detail: string } }): T {
	if (!outcome.ok) throw new Error(outcome.problem.detail);
	return outcome.value;
}

describe('create', () => {
	it('refuses a reader', async () => {
		const outcome = await runbooks.create(await makeActor('reader'), runbookInputOf());
		expect(outcome).toMatchObject({ ok: false, problem: { code: 'forbidden' } });
		expect(await select('SELECT id FROM runbooks')).toEqual([]);
	});

	it('makes a draft named by its title, looked after by its author', async () => {
		const author = await makePerson({ role: 'responder' });
		const draft = await makeDraft(author.actor, { title: 'Lager über Nacht: räumen!' });
		expect(draft).toMatchObject({
			slug: 'lager-uber-nacht-raumen',
			state: 'draft',
			revision: 1,
			owner: { id: author.id },
			reviewer: null,
			reviewDue: null
		});
	});

	it('gives the second of one title another name', async () => {
		const author = await makeActor('responder');
		const slugs = await Promise.all([1, 2, 3].map(async () => (await makeDraft(author)).slug));
		expect(slugs.toSorted()).toEqual([
			'index-the-yard-moves',
			'index-the-yard-moves-2',
			'index-the-yard-moves-3'
		]);
		// /runbooks/new is the form.
		expect((await makeDraft(author, { title: 'New' })).slug).toBe('new-2');
	});

	it('notes it in the audit trail and makes it findable', async () => {
		const author = await makeActor('responder');
		await makeDraft(author, { title: 'Quench the bitmaps' });
		expect(await select("SELECT subject FROM audit WHERE action = 'runbook.create'")).toEqual([
			{ subject: 'runbook:quench-the-bitmaps' }
		]);
		const hits = valueOf(await search.find(author, { q: 'quench', limit: 10 }));
		expect(hits.map(({ url }) => url)).toContain('/runbooks/quench-the-bitmaps');
	});
});

describe('update', () => {
	it('refuses a reader and the draft of somebody else', async () => {
		const { slug } = await makeDraft(await makeActor('responder'));
		for (const role of ['reader', 'responder'] as const) {
			const outcome = await runbooks.update(await makeActor(role), slug, 1, { title: 'Mine now' });
			expect(outcome).toMatchObject({ ok: false, problem: { code: 'forbidden' } });
		}
		expect(await select('SELECT revision FROM runbookRevisions')).toHaveLength(1);
	});

	it('refuses an edit based on an older revision, and hands over what stands there', async () => {
		const author = await makeActor('responder');
		const { slug } = await makeDraft(author);
		valueOf(await runbooks.update(author, slug, 1, { title: 'First' }));
		const outcome = await runbooks.update(author, slug, 1, { title: 'Second' });
		expect(outcome).toMatchObject({
			ok: false,
			problem: { code: 'stale', current: { title: 'First', revision: 2 } }
		});
		expect(await select('SELECT title FROM runbookRevisions WHERE revision > 1')).toEqual([
			{ title: 'First' }
		]);
	});

	it('refuses a responder a runbook of theirs that a curator retired', async () => {
		const author = await makeActor('responder');
		const { slug } = await makePublished(author);
		valueOf(await runbooks.retire(await makeActor('curator'), slug));
		const outcome = await runbooks.update(author, slug, 1, { title: 'Again' });
		expect(outcome).toMatchObject({ ok: false, problem: { code: 'forbidden' } });
	});

	it('makes no revision of an edit that changes nothing', async () => {
		const author = await makeActor('responder');
		const { slug, title } = await makeDraft(author);
		expect(valueOf(await runbooks.update(author, slug, 1, { title })).revision).toBe(1);
	});

	it('keeps every text with who wrote it and why', async () => {
		const author = await makePerson({ role: 'responder' });
		const curator = await makePerson({ role: 'curator' });
		const { slug } = await makeDraft(author.actor);
		valueOf(await runbooks.update(curator.actor, slug, 1, { title: 'Index them', note: 'shorter' }));
		const page = valueOf(await runbooks.revisions(author.actor, slug));
		expect(page.items).toMatchObject([
			{ revision: 2, title: 'Index them', createdBy: { id: curator.id }, note: 'shorter', state: 'draft' },
			{ revision: 1, title: 'Index the yard moves', createdBy: { id: author.id }, note: null, state: null }
		]);
		expect(valueOf(await runbooks.revision(author.actor, slug, 1)).title).toBe('Index the yard moves');
	});

	it('leaves the published text to readers until the new one is published', async () => {
		const author = await makeActor('responder');
		const reader = await makeActor('reader');
		const { slug } = await makePublished(author);
		const edited = valueOf(await runbooks.update(author, slug, 1, { title: 'Another title' }));
		expect(edited).toMatchObject({ title: 'Another title', state: 'draft', revision: 2 });
		expect(valueOf(await runbooks.read(reader, slug))).toMatchObject({
			title: 'Index the yard moves',
			state: 'published',
			revision: 1
		});
		const [listed] = valueOf(await runbooks.list(reader, { state: 'published' })).items;
		expect(listed?.draft).toEqual({ revision: 2, state: 'draft' });
		expect(valueOf(await runbooks.list(reader, { state: 'draft' })).items).toHaveLength(1);
	});

	it('takes a text in review back to draft, so that nobody approves what they have not read', async () => {
		const author = await makeActor('responder');
		const { slug } = await makeDraft(author);
		valueOf(await runbooks.review(author, slug, { action: 'submit' }));
		expect(valueOf(await runbooks.update(author, slug, 1, { title: 'Changed' })).state).toBe('draft');
	});
});
