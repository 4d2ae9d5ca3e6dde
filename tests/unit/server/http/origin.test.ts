import { describe, expect, it } from 'vitest';
import * as tokens from '$lib/server/sessions/tokens-service';
import { makePerson } from '../../../fixtures/factories/person';
import { withDatabase } from '../../../fixtures/database';
import { ORIGIN, request, signInAs } from '../../../fixtures/request';

withDatabase();

const SIZING = { kind: 'sort', rows: 1000, width: 100, memoryKb: 4096 };

async function cookieOfReader(): Promise<string> {
	const person = await makePerson({ role: 'reader' });
	return `catchwater_session=${await signInAs(person.id)}`;
}

async function tokenOfReader(): Promise<string> {
	const { actor, id } = await makePerson({ role: 'reader' });
	const made = await tokens.create(actor, { personId: id, name: 'curl', role: 'reader', days: 1 });
	if (!made.ok) throw new Error(made.problem.detail);
	return made.value.token;
}

describe('checkOrigin, with a session cookie', () => {
	it.each([
		['another site', 'https://evil.example'],
		['the same host on another port', 'http://localhost:8080'],
		['a sandboxed page', 'null']
	])('refuses a request from %s', async (_title, origin) => {
		const headers = { cookie: await cookieOfReader(), origin };
		const response = await request('POST', '/api/v1/sizing', { headers, body: SIZING });
		expect(response.status).toBe(403);
		expect(await response.json()).toMatchObject({ code: 'forbidden' });
	});

	it('refuses a request without Origin', async () => {
		const headers = { cookie: await cookieOfReader() };
		expect((await request('POST', '/api/v1/sizing', { headers, body: SIZING })).status).toBe(403);
	});

	it.each(['text/plain', 'application/x-www-form-urlencoded', 'application/json'])(
		'refuses a foreign %s body, whatever a form may send',
		async (type) => {
			const headers = {
				cookie: await cookieOfReader(),
				origin: 'https://evil.example',
				'content-type': type
			};
			const response = await request('POST', '/sign-out', { headers, body: 'a=b' });
			expect(response.status).toBe(403);
		}
	);

	it('takes a request from our own pages', async () => {
		const headers = { cookie: await cookieOfReader(), origin: ORIGIN };
		expect((await request('POST', '/api/v1/sizing', { headers, body: SIZING })).status).toBe(200);
	});

	it('takes reading requests from anywhere', async () => {
		const headers = { cookie: await cookieOfReader(), origin: 'https://evil.example' };
		expect((await request('GET', '/account', { headers })).status).toBe(200);
	});
});

describe('checkOrigin, with a token', () => {
	const form = new FormData();
	form.append('evidence', new Blob(['nothing in particular']), 'note.txt');
	it.each([
		['a multipart body', form, undefined],
		['a text/plain body', 'nothing in particular', 'text/plain'],
		['a urlencoded body', new URLSearchParams({ a: 'b' }), undefined]
	])('takes %s without Origin, as curl sends it', async (_title, body, type) => {
		const headers: Record<string, string> = { authorization: `Bearer ${await tokenOfReader()}` };
		if (type) headers['content-type'] = type;
		const response = await request('POST', '/api/v1/sizing', { headers, body });
		// Not JSON, so the call itself refuses it: it was reached.
		expect(response.status).toBe(415);
	});

	it('answers an unknown call with 404', async () => {
		const headers = { authorization: `Bearer ${await tokenOfReader()}` };
		expect((await request('GET', '/api/v1/nothing-of-the-kind', { headers })).status).toBe(404);
	});

	it('never falls back on the cookie beside it', async () => {
		const headers = { cookie: await cookieOfReader(), origin: ORIGIN, authorization: 'Bearer cw_unknown' };
		expect((await request('POST', '/api/v1/sizing', { headers, body: SIZING })).status).toBe(401);
		expect((await request('GET', '/account', { headers })).status).toBe(303);
	});
});

describe('checkOrigin, without either', () => {
	it('refuses a sign-in that another site sends', async () => {
		const response = await request('POST', '/sign-in', {
			headers: { origin: 'https://evil.example' },
			body: new URLSearchParams({ email: 'a@b.example', password: 'x' })
		});
		expect(response.status).toBe(403);
	});
});
