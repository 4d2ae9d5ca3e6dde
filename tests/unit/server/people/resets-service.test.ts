import { beforeEach, describe, expect, it } from 'vitest';
import { SYSTEM } from '$lib/domain/person/person';
import { AuditModel } from '$lib/server/db/models/audit';
import { PasswordResetModel } from '$lib/server/db/models/password-reset';
import { write } from '$lib/server/db/transaction';
import { hashPassword } from '$lib/server/people/password';
import * as people from '$lib/server/people/people-service';
import * as resets from '$lib/server/people/resets-service';
import * as sessions from '$lib/server/sessions/sessions-service';
import { withDatabase } from '../../../fixtures/database';
import { makePerson } from '../../../fixtures/factories/person';
import { countMailsTo, readMailedLink } from '../../../fixtures/outbox';
import { ORIGIN, request } from '../../../fixtures/request';

const EMAIL = 'mara@northmoor.example';
const OLD = 'lantern gravel otter nine';
const NEW = 'harbour crane weather seven';

withDatabase();

let id = 0;
let made = 0;
let address = '';
beforeEach(async () => {
	({ id } = await makePerson({ email: EMAIL, passwordHash: await hashPassword(OLD) }));
	made += 1;
	address = `198.51.100.${made}`;
});

async function forget(email: string, from = address): Promise<Response> {
	const response = await request('POST', '/forgotten', {
		body: new URLSearchParams({ email }),
		headers: { origin: ORIGIN },
		address: from
	});
	await resets.settled();
	return response;
}

function choose(link: string, password = NEW): Promise<Response> {
	return request('POST', link, { body: new URLSearchParams({ password }), headers: { origin: ORIGIN } });
}

function signIn(password: string) {
	return people.signIn({ email: EMAIL, password, address });
}

describe('the page for a forgotten password', () => {
	it('answers the same whether anybody has the address', async () => {
		const known = await forget(EMAIL);
		const unknown = await forget('nobody@northmoor.example');
		expect([known.status, unknown.status]).toEqual([200, 200]);
		const [a, b] = [await known.text(), await unknown.text()];
		expect(a.replaceAll(EMAIL, '')).toBe(b.replaceAll('nobody@northmoor.example', ''));
		expect(await countMailsTo('nobody@northmoor.example')).toBe(0);
		expect(await countMailsTo(EMAIL)).toBe(1);
	});

	it('mails nothing to somebody who left', async () => {
		await people.update(SYSTEM, id, 1, { active: false });
		expect((await forget(EMAIL)).status).toBe(200);
		expect(await countMailsTo(EMAIL)).toBe(0);
	});

	it('refuses an address that would write a header of its own', async () => {
		const response = await forget(`${EMAIL}\r\nBcc: all@northmoor.example`);
		expect(response.status).toBe(400);
		expect(await countMailsTo(EMAIL)).toBe(0);
	});

	it('refuses a flood from one network address, with the seconds to wait', async () => {
		for (let count = 0; count < 10; count += 1) await forget(`nobody${count}@northmoor.example`);
		const response = await forget(EMAIL);
		expect(response.status).toBe(429);
		expect(Number(response.headers.get('retry-after'))).toBeGreaterThan(0);
		expect((await forget(EMAIL, '203.0.113.77')).status).toBe(200);
	});

	it('mails a person so many links and no more, whoever asks', async () => {
		for (let count = 0; count < 6; count += 1) await forget(EMAIL, `203.0.113.${count}`);
		expect(await countMailsTo(EMAIL)).toBe(3);
	});

	it('lets no stranger lock a person out: password, sign-ins and first link stay good', async () => {
		await forget(EMAIL);
		const link = await readMailedLink(EMAIL);
		const cookie = await sessions.create(id, null);
		for (let count = 0; count < 6; count += 1) await forget(EMAIL, `203.0.113.${100 + count}`);
		expect(await signIn(OLD)).toMatchObject({ ok: true });
		expect((await sessions.validate(cookie.value)).actor).not.toBeNull();
		expect((await choose(link)).status).toBe(303);
	});
});

describe('the page for a new password', () => {
	async function expectGone(link: string): Promise<void> {
		expect((await request('GET', link)).status).toBe(404);
		const sent = await choose(link, 'yet another one entirely');
		expect(sent.status).toBe(404);
		expect(sent.headers.getSetCookie()).toEqual([]);
		expect(await signIn('yet another one entirely')).toMatchObject({ ok: false });
	}

	it('opens for no secret that was never mailed', async () => {
		await expectGone('/reset/never-was');
	});

	it('opens no more after its hour', async () => {
		await forget(EMAIL);
		await write(() => PasswordResetModel.update({ expiresAt: '2026-01-01T00:00:00.000Z' }, { where: {} }));
		await expectGone(await readMailedLink(EMAIL));
	});

	it('opens once', async () => {
		await forget(EMAIL);
		const link = await readMailedLink(EMAIL);
		expect((await choose(link)).status).toBe(303);
		await expectGone(link);
		expect(await signIn(NEW)).toMatchObject({ ok: true });
	});

	it('opens by no other link of the person once one was used', async () => {
		await forget(EMAIL);
		const first = await readMailedLink(EMAIL);
		await forget(EMAIL);
		await choose(await readMailedLink(EMAIL));
		await expectGone(first);
	});

	it('opens no more once the password was changed otherwise', async () => {
		await forget(EMAIL);
		const link = await readMailedLink(EMAIL);
		const actor = (await sessions.validate((await sessions.create(id, null)).value)).actor ?? SYSTEM;
		await people.changePassword(actor, { current: OLD, password: NEW, address });
		await expectGone(link);
	});

	it('opens no more for somebody who left, nor after they came back', async () => {
		await forget(EMAIL);
		const link = await readMailedLink(EMAIL);
		await people.update(SYSTEM, id, 1, { active: false });
		await expectGone(link);
		await people.update(SYSTEM, id, 2, { active: true });
		await expectGone(link);
	});

	it('refuses a weak password and stays open', async () => {
		await forget(EMAIL);
		const link = await readMailedLink(EMAIL);
		const response = await choose(link, 'short');
		expect(response.status).toBe(400);
		expect((await response.json()).data.issues).toHaveProperty('password');
		expect((await choose(link)).status).toBe(303);
	});

	it('lets one of two at once through', async () => {
		await forget(EMAIL);
		const secret = (await readMailedLink(EMAIL)).replace('/reset/', '');
		const results = await Promise.all([resets.reset(secret, NEW), resets.reset(secret, `${NEW} too`)]);
		expect(results.filter(({ ok }) => ok)).toHaveLength(1);
	});

	it('ends the sign-ins of before, signs in anew, tells the person and leaves a line', async () => {
		await forget(EMAIL);
		const before = await sessions.create(id, null);
		const response = await choose(await readMailedLink(EMAIL));
		expect((await sessions.validate(before.value)).actor).toBeNull();
		expect(response.headers.getSetCookie().join()).toContain('catchwater_session=');
		expect(await signIn(OLD)).toMatchObject({ ok: false });
		expect(await countMailsTo(EMAIL)).toBe(2);
		expect(await AuditModel.count({ where: { action: 'person.password', actorId: id } })).toBe(1);
	});

	it('keeps the hash of a link alone', async () => {
		await forget(EMAIL);
		const secret = (await readMailedLink(EMAIL)).replace('/reset/', '');
		const rows = [
			...(await PasswordResetModel.findAll({ raw: true })),
			...(await AuditModel.findAll({ raw: true }))
		];
		expect(JSON.stringify(rows)).not.toContain(secret);
	});
});
