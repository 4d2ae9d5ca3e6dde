import { describe, expect, it } from 'vitest';
import { select } from '$lib/server/db/query';
import { withDatabase } from '../../../fixtures/database';
import { readAnswer } from '../../../fixtures/api';
import { makePerson } from '../../../fixtures/factories/person';
import { makeDraft, makePublished, runbookInputOf } from '../../../fixtures/factories/runbook';
import { request, signInAs } from '../../../fixtures/request';

withDatabase();

/** Somebody signed in, with what their requests carry. */
async function makeCaller(role: 'reader' | 'responder' | 'curator') {
	const { id, actor } = await makePerson({ role });
	const as = { cookie: await signInAs(id) };
	return {
		id,
		actor,
		send: (method: string, path: string, body?: unknown, headers: Record<string, string> = {}) =>
			request(method, `/api/v1/runbooks${path}`, {
				as,
				...(body === undefined ? {} : { body }),
				headers: { origin: 'http://localhost', ...headers }
			})
	};
}

describe('POST /api/v1/runbooks', () => {
	it('refuses what is missing, field by field, and readers altogether', async () => {
		const responder = await makeCaller('responder');
		const refused = await responder.send('POST', '', { title: ' ' });
		expect(refused.status).toBe(400);
		expect(refused.headers.get('content-type')).toBe('application/problem+json');
		const { errors } = await refused.json();
		expect(errors.map(({ field }: { field: string }) => field)).toEqual([
			'title',
			'summary',
			'engines',
			'symptoms',
			'reviewEveryDays',
			'body'
		]);
		expect((await (await makeCaller('reader')).send('POST', '', runbookInputOf())).status).toBe(403);
	});

	it('makes one draft for one Idempotency-Key', async () => {
		const responder = await makeCaller('responder');
		const post = () => responder.send('POST', '', runbookInputOf(), { 'idempotency-key': 'once' });
		const first = await post();
		const again = await post();
		expect(first.headers.get('location')).toBe('/api/v1/runbooks/index-the-yard-moves');
		expect(first.headers.get('etag')).toBe('"1"');
		expect(await again.json()).toEqual(await readAnswer(first, 'POST', '/runbooks'));
		expect(await select('SELECT id FROM runbooks')).toHaveLength(1);
	});
});

describe('PATCH /api/v1/runbooks/{slug}', () => {
	it('refuses an edit without If-Match, a stale one, a cleared field, and the draft of somebody else', async () => {
		const responder = await makeCaller('responder');
		const { slug } = await makeDraft(responder.actor);
		const patch = (body: unknown, headers = {}) => responder.send('PATCH', `/${slug}`, body, headers);
		expect((await patch({ title: 'X' })).status).toBe(428);
		const stale = await patch({ title: 'X' }, { 'if-match': '"7"' });
		expect(stale.status).toBe(412);
		expect((await stale.json()).current).toMatchObject({ slug, revision: 1 });
		expect((await patch({ title: null }, { 'if-match': '"1"' })).status).toBe(400);
		const other = await makeCaller('responder');
		const foreign = await other.send('PATCH', `/${slug}`, { title: 'X' }, { 'if-match': '"1"' });
		expect(foreign.status).toBe(403);
	});

	it('answers the new revision with its ETag', async () => {
		const responder = await makeCaller('responder');
		const { slug } = await makeDraft(responder.actor);
		const response = await responder.send(
			'PATCH',
			`/${slug}`,
			{ title: 'Shorter', note: 'for the list' },
			{ 'if-match': '"1"', 'content-type': 'application/merge-patch+json' }
		);
		expect(response.headers.get('etag')).toBe('"2"');
		expect(await readAnswer(response, 'PATCH', '/runbooks/{slug}')).toMatchObject({
			title: 'Shorter',
			revision: 2,
			state: 'draft'
		});
	});
});

describe('POST /api/v1/runbooks/{slug}/review, /publish, /retire', () => {
	it('answers 409 with every reason, 404 for no runbook, 400 for no action', async () => {
		const curator = await makeCaller('curator');
		const { slug } = await makeDraft(curator.actor, { body: '### 1. Do it (action)' });
		const refused = await curator.send('POST', `/${slug}/publish`);
		expect(refused.status).toBe(409);
		expect((await refused.json()).reasons.length).toBeGreaterThan(3);
		expect((await curator.send('POST', '/nothing/publish')).status).toBe(404);
		expect((await curator.send('POST', `/${slug}/retire`, {})).status).toBe(409);
		expect((await curator.send('POST', `/${slug}/review`, { action: 'burn' })).status).toBe(400);
		expect((await curator.send('POST', `/${slug}/publish`, 'note')).status).toBe(415);
	});

	it('leads from draft to retired by two people', async () => {
		const responder = await makeCaller('responder');
		const curator = await makeCaller('curator');
		const { slug } = await makeDraft(responder.actor);
		const steps = [
			{ by: responder, path: 'review', body: { action: 'submit' }, state: 'in-review' },
			{ by: curator, path: 'review', body: { action: 'return', note: 'Which depot?' }, state: 'draft' },
			{ by: responder, path: 'review', body: { action: 'submit' }, state: 'in-review' },
			{ by: curator, path: 'review', body: { action: 'approve' }, state: 'in-review' },
			{ by: curator, path: 'publish', body: undefined, state: 'published' },
			{ by: curator, path: 'retire', body: { note: 'replaced' }, state: 'retired' }
		];
		for (const { by, path, body, state } of steps) {
			const response = await by.send('POST', `/${slug}/${path}`, body, { 'if-match': '"1"' });
			expect(await readAnswer(response, 'POST', `/runbooks/{slug}/${path}`)).toMatchObject({ state });
		}
		const stale = await curator.send('POST', `/${slug}/retire`, {}, { 'if-match': '"9"' });
		expect(stale.status).toBe(412);
	});
});

describe('GET /api/v1/runbooks/{slug}/revisions and /compare', () => {
	it('refuses revisions that there are not and a comparison with one side', async () => {
		const reader = await makeCaller('reader');
		const { slug } = await makePublished((await makeCaller('responder')).actor);
		for (const path of ['revisions/2', 'revisions/x', 'compare?from=1&to=2'])
			expect((await reader.send('GET', `/${slug}/${path}`)).status).toBe(404);
		expect((await reader.send('GET', `/${slug}/compare?from=1`)).status).toBe(400);
	});

	it('answers exactly what the document says, page by page', async () => {
		const responder = await makeCaller('responder');
		const { slug } = await makePublished(responder.actor);
		await responder.send('PATCH', `/${slug}`, { title: 'Another' }, { 'if-match': '"1"' });
		const first = await responder.send('GET', `/${slug}/revisions?limit=1`);
		expect(first.headers.get('link')).toContain('rel="next"');
		const page = await readAnswer<{ items: { revision: number }[]; next: string; total: number }>(
			first,
			'GET',
			'/runbooks/{slug}/revisions'
		);
		expect(page).toMatchObject({ items: [{ revision: 2, state: 'draft' }], total: 2 });
		const second = await responder.send('GET', `/${slug}/revisions?limit=1&cursor=${page.next}`);
		expect(await second.json()).toMatchObject({
			items: [{ revision: 1, state: 'published', events: [{}, {}, { action: 'publish' }] }],
			next: null
		});
		const one = await responder.send('GET', `/${slug}/revisions/1`);
		expect(await readAnswer(one, 'GET', '/runbooks/{slug}/revisions/{n}')).toMatchObject({ revision: 1 });
		const compared = await responder.send('GET', `/${slug}/compare?from=1&to=2`);
		expect(await readAnswer(compared, 'GET', '/runbooks/{slug}/compare')).toMatchObject({
			fields: [{ field: 'title' }]
		});
	});
});
