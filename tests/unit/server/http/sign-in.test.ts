import { beforeEach, describe, expect, it } from 'vitest';
import { hashPassword } from '$lib/server/people/password';
import { makePerson } from '../../../fixtures/factories/person';
import { withDatabase } from '../../../fixtures/database';
import { ORIGIN, request } from '../../../fixtures/request';

const EMAIL = 'mara@northmoor.example';
const PASSWORD = 'lantern gravel otter nine';

withDatabase();

let address = '';
let made = 0;

beforeEach(async () => {
	await makePerson({ email: EMAIL, passwordHash: await hashPassword(PASSWORD) });
	made += 1;
	address = `198.51.100.${made}`;
});

function signIn(
	fields: Record<string, string>,
	options: { from?: string; path?: string; cookie?: string } = {}
) {
	return request('POST', options.path ?? '/sign-in', {
		body: new URLSearchParams(fields),
		headers: { origin: ORIGIN, ...(options.cookie ? { cookie: options.cookie } : {}) },
		address: options.from ?? address
	});
}

function cookieOf(response: Response): string {
	const header = response.headers.getSetCookie().find((cookie) => cookie.startsWith('catchwater_session='));
	return header?.split(';')[0] ?? '';
}

describe('the sign-in form', () => {
	it('refuses an unknown address and a wrong password with the same words', async () => {
		const unknown = await signIn({ email: 'nobody@northmoor.example', password: PASSWORD });
		const wrong = await signIn({ email: EMAIL, password: 'not the password at all' });
		expect(unknown.status).toBe(401);
		expect(wrong.status).toBe(401);
		const [a, b] = [await unknown.json(), await wrong.json()];
		expect(a.data.problem).toEqual(b.data.problem);
	});

	it('gives back what was typed, but never the password', async () => {
		const response = await signIn({ email: EMAIL, password: 'not the password at all' });
		const text = await response.text();
		expect(text).toContain(EMAIL);
		expect(text).not.toContain('not the password at all');
	});

	it('names the field that does not fit', async () => {
		const response = await signIn({ email: 'mara', password: '' });
		expect(response.status).toBe(400);
		const { data } = await response.json();
		expect(Object.keys(data.issues).sort()).toEqual(['email', 'password']);
	});

	it('refuses further tries for one person from one address with the seconds to wait', async () => {
		for (let count = 0; count < 8; count += 1) await signIn({ email: EMAIL, password: 'wrong wrong wrong' });
		const response = await signIn({ email: EMAIL, password: PASSWORD });
		expect(response.status).toBe(429);
		expect(Number(response.headers.get('retry-after'))).toBeGreaterThan(0);
	});

	it('lets the person in while a stranger elsewhere is locked out', async () => {
		for (let count = 0; count < 10; count += 1) {
			await signIn({ email: EMAIL, password: 'wrong wrong wrong' }, { from: '203.0.113.9' });
		}
		expect((await signIn({ email: EMAIL, password: PASSWORD })).status).toBe(303);
	});

	it('counts the whole of one IPv6 network as one address', async () => {
		for (let count = 0; count < 8; count += 1) {
			await signIn({ email: EMAIL, password: 'wrong wrong wrong' }, { from: `2001:db8::${count + 1}` });
		}
		const response = await signIn({ email: EMAIL, password: PASSWORD }, { from: '2001:0db8:0:0:9::99' });
		expect(response.status).toBe(429);
	});

	it('refuses a person who left', async () => {
		const gone = await makePerson({
			email: 'gone@northmoor.example',
			passwordHash: await hashPassword(PASSWORD),
			deactivatedAt: '2026-02-01T00:00:00.000Z'
		});
		expect((await signIn({ email: gone.email, password: PASSWORD })).status).toBe(401);
	});

	it('signs in with a new session, ends the one before and goes on to the page asked for', async () => {
		const first = await signIn({ email: EMAIL, password: PASSWORD });
		const before = cookieOf(first);
		const second = await signIn(
			{ email: `  ${EMAIL.toUpperCase()} `, password: PASSWORD },
			{ path: '/sign-in?next=%2Faccount', cookie: before }
		);
		expect(second.status).toBe(303);
		expect(second.headers.get('location')).toBe('/account');
		expect(cookieOf(second)).not.toBe(before);
		expect((await request('GET', '/account', { headers: { cookie: before } })).status).toBe(303);
		expect((await request('GET', '/account', { headers: { cookie: cookieOf(second) } })).status).toBe(200);
	});

	it('leads to no other host', async () => {
		for (const next of [
			'//evil.example/x',
			'https://evil.example',
			'/\\evil.example',
			'javascript:alert(1)'
		]) {
			const path = `/sign-in?next=${encodeURIComponent(next)}`;
			const response = await signIn({ email: EMAIL, password: PASSWORD }, { path });
			expect(response.headers.get('location')).toBe('/');
		}
	});

	it('sends a cookie that scripts cannot read, Secure only where the origin is https', async () => {
		const response = await signIn({ email: EMAIL, password: PASSWORD });
		const header = response.headers.getSetCookie().find((cookie) => cookie.startsWith('catchwater_session='));
		expect(header).toContain('HttpOnly');
		expect(header).toContain('SameSite=lax');
		expect(header).not.toContain('Secure');
	});
});

describe('signing out', () => {
	it('ends the session on the server, too', async () => {
		const cookie = cookieOf(await signIn({ email: EMAIL, password: PASSWORD }));
		const response = await request('POST', '/sign-out', { headers: { cookie, origin: ORIGIN } });
		expect(response.status).toBe(303);
		expect(response.headers.get('location')).toBe('/sign-in');
		expect((await request('GET', '/account', { headers: { cookie } })).status).toBe(303);
	});
});
