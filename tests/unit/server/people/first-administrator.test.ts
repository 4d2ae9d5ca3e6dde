import { beforeEach, describe, expect, it } from 'vitest';
import { AuditModel } from '$lib/server/db/models/audit';
import { PersonModel } from '$lib/server/db/models/person';
import { describeFirst, firstCode, makeFirst } from '$lib/server/people/first-administrator';
import { withDatabase } from '../../../fixtures/database';
import { makePerson } from '../../../fixtures/factories/person';
import { ORIGIN, request } from '../../../fixtures/request';

const INPUT = {
	name: 'Ines Halvorsen',
	email: 'ines@northmoor.example',
	password: 'lantern gravel otter nine'
};

withDatabase();

let made = 0;
let address = '';
beforeEach(() => {
	made += 1;
	address = `198.51.100.${made}`;
});

function send(fields: Record<string, string>, from = address): Promise<Response> {
	const body = new URLSearchParams(fields);
	return request('POST', '/first', { body, headers: { origin: ORIGIN }, address: from });
}

describe('the page for the first administrator', () => {
	it('is not there once there is anybody, not even somebody who left', async () => {
		const code = firstCode();
		await makePerson({ role: 'reader', deactivatedAt: '2026-02-01T00:00:00.000Z' });
		expect((await request('GET', '/first')).status).toBe(404);
		expect((await send({ ...INPUT, code })).status).toBe(409);
		expect(await PersonModel.count()).toBe(1);
	});

	it.each(['', 'AAAAA-AAAAA-AAAAA-AAAAA'])('refuses the code %j, from this machine, too', async (code) => {
		const response = await send({ ...INPUT, code }, '127.0.0.1');
		expect(response.status).toBe(400);
		expect((await response.json()).data.issues).toHaveProperty('code');
		expect(await PersonModel.count()).toBe(0);
	});

	it('refuses further codes after so many, with the seconds to wait', async () => {
		for (let count = 0; count < 20; count += 1) await send({ ...INPUT, code: `guess ${count}` });
		const response = await send({ ...INPUT, code: firstCode() });
		expect(response.status).toBe(429);
		expect(Number(response.headers.get('retry-after'))).toBeGreaterThan(0);
	});

	it('refuses a weak password and gives back what was typed, but neither password nor code', async () => {
		const code = firstCode();
		const response = await send({ ...INPUT, password: 'too short', code });
		expect(response.status).toBe(400);
		const text = await response.text();
		expect(text).toContain(INPUT.email);
		expect(text).not.toContain('too short');
		expect(text).not.toContain(code);
	});

	it('lets one of two at once in', async () => {
		const code = firstCode();
		const results = await Promise.all([
			makeFirst({ ...INPUT, code, address }),
			makeFirst({ ...INPUT, email: 'other@northmoor.example', code, address })
		]);
		expect(results.filter(({ ok }) => ok)).toHaveLength(1);
		expect(await PersonModel.count()).toBe(1);
	});

	it('makes an administrator, signs them in, leaves a line, and the code opens nothing any more', async () => {
		const code = firstCode();
		const response = await send({ ...INPUT, code: code.toLowerCase().replaceAll('-', ' ') });
		expect(response.status).toBe(303);
		expect(response.headers.getSetCookie().join()).toContain('catchwater_session=');
		expect(await PersonModel.findOne()).toMatchObject({ email: INPUT.email, role: 'administrator' });
		expect(await AuditModel.count({ where: { action: 'person.first' } })).toBe(1);
		expect(firstCode()).not.toBe(code);
	});
});

describe('signing in', () => {
	it('leads to it on an empty installation alone', async () => {
		expect((await request('GET', '/sign-in')).headers.get('location')).toBe('/first');
		await makePerson();
		expect((await request('GET', '/sign-in')).status).toBe(200);
	});
});

describe('describeFirst', () => {
	it('prints address and code where nobody is, and nothing otherwise', async () => {
		const lines = (await describeFirst()).join('\n');
		expect(lines).toContain('http://localhost/first');
		expect(lines).toContain(firstCode());
		await makePerson();
		expect(await describeFirst()).toEqual([]);
	});
});
