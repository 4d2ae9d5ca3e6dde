import { describe, expect, it } from 'vitest';
import { select } from '$lib/server/db/query';
import * as runbooks from '$lib/server/runbooks/runbooks-service';
import { withDatabase } from '../../../fixtures/database';
import { makePerson } from '../../../fixtures/factories/person';
import { makeDraft, makePublished, SOUND_BODY } from '../../../fixtures/factories/runbook';
import { request, signInAs } from '../../../fixtures/request';

withDatabase();

/** Somebody at a browser; a form's fields go as a browser sends them. */
async function makeVisitor(role: 'reader' | 'responder' | 'curator') {
	const { id, actor } = await makePerson({ role });
	const as = { cookie: await signInAs(id) };
	const headers = { origin: 'http://localhost' };
	return {
		actor,
		open: (path: string) => request('GET', path, { as, headers }),
		send: (path: string, fields: Record<string, string | string[]>) => {
			const body = new URLSearchParams();
			for (const [name, value] of Object.entries(fields))
				for (const one of [value].flat()) body.append(name, one);
			return request('POST', path, { as, body, headers });
		}
	};
}

const FIELDS = {
	title: 'Index the yard moves',
	summary: 'When a scan throws nearly everything away.',
	body: SOUND_BODY.replaceAll('\n', '\r\n'),
	engines: ['postgresql'],
	symptoms: ['filter-discards-most', 'sort-spill'],
	reviewEveryDays: '90'
};

describe('/runbooks/new', () => {
	it('is closed to readers', async () => {
		const reader = await makeVisitor('reader');
		expect((await reader.open('/runbooks/new')).status).toBe(403);
		expect((await reader.send('/runbooks/new?/save', FIELDS)).status).toBe(403);
	});

	it('shows again what was typed, and what is wrong with each field', async () => {
		const responder = await makeVisitor('responder');
		const answer = await responder.send('/runbooks/new?/save', {
			...FIELDS,
			title: ' ',
			engines: [],
			reviewEveryDays: 'soon'
		});
		expect(answer.status).toBe(400);
		const { data } = await answer.json();
		expect(Object.keys(data.issues)).toEqual(['title', 'engines', 'reviewEveryDays']);
		expect(data.values).toMatchObject({ reviewEveryDays: 'soon', symptoms: FIELDS.symptoms });
		expect(await select('SELECT id FROM runbooks')).toEqual([]);
	});

	it('begins with every part that the gate asks for, for the symptom of the page that led here', async () => {
		const responder = await makeVisitor('responder');
		const page = await (await responder.open('/runbooks/new?symptom=jit-dominates&symptom=slow')).json();
		expect(page.values.symptoms).toEqual(['jit-dominates']);
		expect(page.preview.steps.map(({ kind }: { kind: string }) => kind)).toEqual([
			'check',
			'action',
			'verify',
			'undo'
		]);
		expect(page.preview.reasons).toEqual([]);
	});

	it('previews without saving, with the caution of each statement', async () => {
		const responder = await makeVisitor('responder');
		const answer = await responder.send('/runbooks/new?/preview', { ...FIELDS, title: '' });
		const { data } = await answer.json();
		expect(data.preview.steps[1].statements[0]).toMatchObject({
			kind: 'create-index-concurrently',
			level: 2
		});
		expect(await select('SELECT id FROM runbooks')).toEqual([]);
	});

	it('saves a draft with the line ends of a text, and goes on in its editor', async () => {
		const responder = await makeVisitor('responder');
		const answer = await responder.send('/runbooks/new?/save', FIELDS);
		expect(answer.status).toBe(303);
		expect(answer.headers.get('location')).toBe('/runbooks/index-the-yard-moves/edit?saved=1#saved');
		expect(await select('SELECT body, reviewEveryDays FROM runbookRevisions')).toEqual([
			{ body: SOUND_BODY, reviewEveryDays: 90 }
		]);
	});
});

describe('/runbooks/[slug]/edit', () => {
	it('is closed to whoever neither looks after it nor curates', async () => {
		const { slug } = await makeDraft((await makePerson({ role: 'responder' })).actor);
		const other = await makeVisitor('responder');
		expect((await other.open(`/runbooks/${slug}/edit`)).status).toBe(403);
		const answer = await other.send(`/runbooks/${slug}/edit?/save`, { ...FIELDS, revision: '1' });
		expect(answer.status).toBe(403);
		expect(await select('SELECT revision FROM runbookRevisions')).toHaveLength(1);
	});

	it('shows both texts where somebody was faster, and saves on the revision that stands then', async () => {
		const responder = await makeVisitor('responder');
		const { slug } = await makeDraft(responder.actor);
		await runbooks.update(responder.actor, slug, 1, { body: `${SOUND_BODY}\nTheirs.` });
		const mine = { ...FIELDS, body: `${SOUND_BODY}\nMine.` };
		const answer = await responder.send(`/runbooks/${slug}/edit?/save`, { ...mine, revision: '1' });
		expect(answer.status).toBe(412);
		const { data } = await answer.json();
		expect(data.stale.revision).toBe(2);
		const changed = data.stale.body.filter(({ change }: { change: string }) => change !== 'same');
		expect(changed.map(({ text, change }: { text: string; change: string }) => [change, text])).toEqual([
			['removed', 'Theirs'],
			['added', 'Mine']
		]);
		expect(data.values.body).toContain('Mine.');
		const again = await responder.send(`/runbooks/${slug}/edit?/save`, { ...mine, revision: '2' });
		expect(again.headers.get('location')).toBe(`/runbooks/${slug}/edit?saved=3#saved`);
	});
});

describe('/runbooks/[slug]', () => {
	it('refuses to publish with every reason, and keeps the note of a refused return', async () => {
		const curator = await makeVisitor('curator');
		const { slug } = await makeDraft(curator.actor, { body: '### 1. Do it (action)' });
		const published = await (await curator.send(`/runbooks/${slug}?/publish`, { revision: '1' })).json();
		expect(published.data.problem.reasons).toHaveLength(5);
		const returned = await curator.send(`/runbooks/${slug}?/return`, { note: 'Which table?', revision: '1' });
		expect(returned.status).toBe(409);
		expect((await returned.json()).data.values).toEqual({ form: 'return', note: 'Which table?' });
	});

	it('refuses the buttons of curators to responders, and the draft of somebody else', async () => {
		const responder = await makeVisitor('responder');
		const { slug } = await makeDraft((await makePerson({ role: 'curator' })).actor);
		for (const action of ['submit', 'return', 'approve', 'publish', 'retire'])
			expect((await responder.send(`/runbooks/${slug}?/${action}`, { revision: '1' })).status).toBe(403);
	});

	it('leads a draft to readers by two people, and shows them the published text meanwhile', async () => {
		const responder = await makeVisitor('responder');
		const curator = await makeVisitor('curator');
		const reader = await makeVisitor('reader');
		const { slug } = await makePublished(responder.actor);
		await responder.send(`/runbooks/${slug}/edit?/save`, { ...FIELDS, title: 'New title', revision: '1' });
		const before = await (await reader.open(`/runbooks/${slug}`)).json();
		expect(before.runbook).toMatchObject({ title: FIELDS.title, state: 'published', revision: 1 });
		expect(before.work).toMatchObject({ revision: 2, state: 'draft', publishedRevision: 1 });
		const draft = await (await curator.open(`/runbooks/${slug}?revision=2`)).json();
		expect(draft.runbook.title).toBe('New title');
		await responder.send(`/runbooks/${slug}?/submit`, { revision: '2', note: 'the title only' });
		for (const action of ['approve', 'publish']) {
			const answer = await curator.send(`/runbooks/${slug}?/${action}`, { revision: '2' });
			expect(answer.headers.get('location')).toBe(`/runbooks/${slug}`);
		}
		const after = await (await reader.open(`/runbooks/${slug}`)).json();
		expect(after.runbook).toMatchObject({ title: 'New title', revision: 2 });
		const history = await (await reader.open(`/runbooks/${slug}/history`)).json();
		expect(history.page.items[0].events).toMatchObject([
			{ action: 'submit', note: 'the title only' },
			{ action: 'approve' },
			{ action: 'publish' }
		]);
	});
});

describe('/runbooks/[slug]/compare', () => {
	it('leads to where revisions are chosen when none are named, and knows no others', async () => {
		const reader = await makeVisitor('reader');
		const { slug } = await makeDraft((await makePerson({ role: 'responder' })).actor);
		const nowhere = await reader.open(`/runbooks/${slug}/compare`);
		expect(nowhere.headers.get('location')).toBe(`/runbooks/${slug}/history`);
		expect((await reader.open(`/runbooks/${slug}/compare?from=1&to=2`)).status).toBe(404);
	});
});
