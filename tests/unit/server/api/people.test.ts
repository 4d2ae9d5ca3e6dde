import { describe, expect, it } from 'vitest';
import { IdempotencyKeyModel } from '$lib/server/db/models/idempotency-key';
import { PersonModel } from '$lib/server/db/models/person';
import * as tokens from '$lib/server/sessions/tokens-service';
import { readAnswer } from '../../../fixtures/api';
import { withDatabase } from '../../../fixtures/database';
import { makePerson } from '../../../fixtures/factories/person';
import { countMailsTo } from '../../../fixtures/outbox';
import { request, signInAs } from '../../../fixtures/request';

withDatabase();

/** Signs somebody in who could sign in by themselves. */
async function signIn(role: 'administrator' | 'responder') {
	const person = await makePerson({ role, passwordHash: 'set' });
	return { id: person.id, actor: person.actor, as: { cookie: await signInAs(person.id) } };
}

function patch(path: string, as: { cookie: string }, body: unknown, tag?: string) {
	return request('PATCH', path, { as, body, headers: tag === undefined ? {} : { 'if-match': tag } });
}

describe('PATCH /people/{id}', () => {
	it('refuses an edit without If-Match, and one of another revision with what stands there', async () => {
		const { as } = await signIn('administrator');
		const { id } = await makePerson({ role: 'reader' });
		expect((await patch(`/api/v1/people/${id}`, as, { role: 'curator' })).status).toBe(428);
		const stale = await patch(`/api/v1/people/${id}`, as, { role: 'curator' }, '"7"');
		expect(stale.status).toBe(412);
		expect(await stale.json()).toMatchObject({ code: 'stale', current: { role: 'reader', revision: 1 } });
	});

	it('refuses to lose the last administrator, with the reason', async () => {
		const { id, as } = await signIn('administrator');
		const response = await patch(`/api/v1/people/${id}`, as, { active: false }, '"1"');
		expect(response.status).toBe(409);
		expect(response.headers.get('content-type')).toBe('application/problem+json');
		expect((await response.json()).reasons).toHaveLength(1);
		expect((await PersonModel.findByPk(id))?.deactivatedAt).toBeNull();
	});

	it('names what does not fit', async () => {
		const { as } = await signIn('administrator');
		const { id } = await makePerson();
		const response = await patch(`/api/v1/people/${id}`, as, { role: 'owner', name: 'a\nb' }, '"1"');
		expect(response.status).toBe(400);
		const fields = (await response.json()).errors.map(({ field }: { field: string }) => field);
		expect(fields.sort()).toEqual(['name', 'role']);
	});

	it('gives another role and the next revision', async () => {
		const { as } = await signIn('administrator');
		const { id } = await makePerson({ role: 'reader' });
		const response = await patch(`/api/v1/people/${id}`, as, { role: 'curator' }, '"1"');
		expect(response.headers.get('etag')).toBe('"2"');
		expect(await readAnswer(response, 'PATCH', '/people/{id}')).toMatchObject({ role: 'curator' });
	});
});

describe('GET /people', () => {
	it('lists in pages with the address of the next', async () => {
		const { as } = await signIn('administrator');
		await makePerson();
		const response = await request('GET', '/api/v1/people?limit=1', { as });
		expect(response.headers.get('link')).toContain('rel="next"');
		const page = await readAnswer<{ items: object[]; total: number }>(response, 'GET', '/people');
		expect(page.total).toBe(2);
		expect(JSON.stringify(page)).not.toContain('passwordHash');
	});
});

describe('/invitations', () => {
	const body = { email: 'Ines@Northmoor.example', role: 'responder' };

	it('refuses an address that is several', async () => {
		const { as } = await signIn('administrator');
		const evil = { ...body, email: 'a@x.example\r\nBcc: b@x.example' };
		expect((await request('POST', '/api/v1/invitations', { as, body: evil })).status).toBe(400);
	});

	it('invites once for each Idempotency-Key', async () => {
		const { as } = await signIn('administrator');
		const headers = { 'idempotency-key': 'one' };
		const first = await request('POST', '/api/v1/invitations', { as, body, headers });
		const made = await readAnswer<{ id: number }>(first, 'POST', '/invitations');
		expect(first.headers.get('location')).toBe(`/api/v1/invitations/${made.id}`);
		const again = await request('POST', '/api/v1/invitations', { as, body, headers });
		expect(await again.json()).toEqual(made);
		expect(await countMailsTo('ines@northmoor.example')).toBe(1);
	});

	it('sends again, takes back, and then refuses both', async () => {
		const { as } = await signIn('administrator');
		const made = await (await request('POST', '/api/v1/invitations', { as, body })).json();
		const path = `/api/v1/invitations/${made.id}`;
		const sent = await request('POST', `${path}/resend`, { as });
		expect(await readAnswer(sent, 'POST', '/invitations/{id}/resend')).toMatchObject({ revision: 2 });
		expect((await request('DELETE', path, { as })).status).toBe(204);
		expect((await request('DELETE', path, { as })).status).toBe(409);
		expect((await request('POST', `${path}/resend`, { as })).status).toBe(409);
		const listed = await request('GET', '/api/v1/invitations', { as });
		expect(await readAnswer(listed, 'GET', '/invitations')).toMatchObject({ items: [{ state: 'revoked' }] });
	});
});

describe('/tokens', () => {
	const body = { name: 'alerts', role: 'reader', days: 30 };

	it("shows nobody's token to another, nor lets them take it back", async () => {
		const owner = await signIn('responder');
		const stranger = await signIn('responder');
		const made = await (await request('POST', '/api/v1/tokens', { as: owner.as, body })).json();
		const path = `/api/v1/tokens/${made.id}`;
		expect((await request('GET', path, { as: stranger.as })).status).toBe(404);
		expect((await request('DELETE', path, { as: stranger.as })).status).toBe(404);
		const list = await request('GET', `/api/v1/tokens?person=${owner.id}`, { as: stranger.as });
		expect(list.status).toBe(403);
		expect(await tokens.validate(made.token)).not.toBeNull();
	});

	it("refuses a role above the owner's", async () => {
		const { as } = await signIn('responder');
		const response = await request('POST', '/api/v1/tokens', { as, body: { ...body, role: 'curator' } });
		expect(response.status).toBe(400);
	});

	it('shows a token once: a replay comes without it, and nothing keeps it', async () => {
		const { as } = await signIn('responder');
		const headers = { 'idempotency-key': 'one' };
		const first = await request('POST', '/api/v1/tokens', { as, body, headers });
		const made = await readAnswer<{ id: number; token: string }>(first, 'POST', '/tokens');
		expect(made.token).toMatch(/^cw_/);
		const again = await request('POST', '/api/v1/tokens', { as, body, headers });
		expect(await readAnswer(again, 'POST', '/tokens')).toEqual({ ...made, token: null });
		expect(JSON.stringify(await IdempotencyKeyModel.findAll({ raw: true }))).not.toContain(made.token);
	});

	it("lets an administrator see and take back somebody's", async () => {
		const owner = await signIn('responder');
		const { as } = await signIn('administrator');
		const made = await (await request('POST', '/api/v1/tokens', { as: owner.as, body })).json();
		const list = await request('GET', `/api/v1/tokens?person=${owner.id}`, { as });
		expect(await readAnswer(list, 'GET', '/tokens')).toMatchObject({ items: [{ id: made.id }] });
		expect((await request('DELETE', `/api/v1/tokens/${made.id}`, { as })).status).toBe(204);
		expect(await tokens.validate(made.token)).toBeNull();
	});
});

describe('/settings and /audit', () => {
	it('refuses an edit of another revision, changes and tells who did it', async () => {
		const { id, as } = await signIn('administrator');
		const read = await request('GET', '/api/v1/settings', { as });
		expect(read.headers.get('etag')).toBe('"1"');
		expect((await patch('/api/v1/settings', as, { evidenceDays: 5 }, '"1"')).status).toBe(400);
		expect((await patch('/api/v1/settings', as, { evidenceDays: 90 }, '"3"')).status).toBe(412);
		const changed = await patch('/api/v1/settings', as, { evidenceDays: 90 }, '"1"');
		expect(await readAnswer(changed, 'PATCH', '/settings')).toEqual({ evidenceDays: 90, revision: 2 });
		const trail = await request('GET', `/api/v1/audit?person=${id}&action=settings`, { as });
		expect(await readAnswer(trail, 'GET', '/audit')).toMatchObject({
			items: [{ actor: { id }, subject: 'settings:retention', detail: { from: null, to: 90 } }],
			total: 1
		});
	});

	it('names a filter of the trail that does not fit', async () => {
		const { as } = await signIn('administrator');
		const response = await request('GET', '/api/v1/audit?person=me', { as });
		expect(response.status).toBe(400);
		expect((await response.json()).errors).toMatchObject([{ field: 'person' }]);
	});
});
