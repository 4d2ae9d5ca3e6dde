import { beforeEach, describe, expect, it } from 'vitest';
import { SYSTEM, type Actor } from '$lib/domain/person/person';
import { overrideConfig } from '$lib/server/config';
import { AuditModel } from '$lib/server/db/models/audit';
import { PersonModel } from '$lib/server/db/models/person';
import { SignInLinkModel } from '$lib/server/db/models/sign-in-link';
import { write } from '$lib/server/db/transaction';
import { DEMO_PASSWORD } from '$lib/server/people/demo-password';
import { hashPassword } from '$lib/server/people/password';
import * as people from '$lib/server/people/people-service';
import * as sessions from '$lib/server/sessions/sessions-service';
import { makeActor, makePerson } from '../../../fixtures/factories/person';
import { withDatabase } from '../../../fixtures/database';

const PASSWORD = 'lantern gravel otter nine';
const INPUT = { email: 'ines@northmoor.example', name: 'Ines Halvorsen', role: 'responder' as const };

withDatabase();

let made = 0;
let address = '';
beforeEach(() => {
	made += 1;
	address = `198.51.100.${made}`;
});

async function addInes(): Promise<string> {
	const added = await people.add(SYSTEM, INPUT);
	if (!added.ok) throw new Error(added.problem.detail);
	return added.value.linkToken;
}

describe('add', () => {
	it.each(['reader', 'responder', 'curator'] as const)('refuses a %s', async (role) => {
		const added = await people.add(await makeActor(role), INPUT);
		expect(added).toMatchObject({ ok: false, problem: { code: 'forbidden' } });
		expect(await PersonModel.count({ where: { email: INPUT.email } })).toBe(0);
	});

	it('refuses an address that somebody has', async () => {
		await addInes();
		expect(await people.add(SYSTEM, INPUT)).toMatchObject({ ok: false, problem: { code: 'refused' } });
	});

	it('leaves a person who cannot sign in yet, a link of which only the hash is kept, and an audit line', async () => {
		const link = await addInes();
		const signIn = await people.signIn({ email: INPUT.email, password: '', address });
		expect(signIn).toMatchObject({ ok: false, problem: { code: 'unauthenticated' } });
		const row = await SignInLinkModel.findOne({ rejectOnEmpty: true });
		expect(row.tokenHash).not.toContain(link);
		expect(await AuditModel.count({ where: { action: 'person.add' } })).toBe(1);
	});
});

describe('setPasswordByLink', () => {
	it('refuses a link that never was, was used, has run out or was replaced', async () => {
		const unknown = { ok: false, problem: { code: 'not_found' } };
		expect(await people.setPasswordByLink('never-was', PASSWORD)).toMatchObject(unknown);
		const replaced = await addInes();
		const renewed = await people.renewLink(SYSTEM, INPUT.email);
		if (!renewed.ok) throw new Error(renewed.problem.detail);
		expect(await people.setPasswordByLink(replaced, PASSWORD)).toMatchObject(unknown);
		const used = renewed.value.linkToken;
		expect(await people.setPasswordByLink(used, PASSWORD)).toMatchObject({ ok: true });
		expect(await people.setPasswordByLink(used, PASSWORD)).toMatchObject(unknown);
		const late = await people.renewLink(SYSTEM, INPUT.email);
		await write(() => SignInLinkModel.update({ expiresAt: '2026-01-01T00:00:00.000Z' }, { where: {} }));
		const token = late.ok ? late.value.linkToken : '';
		expect(await people.readLink(token)).toMatchObject(unknown);
		expect(await people.setPasswordByLink(token, PASSWORD)).toMatchObject(unknown);
	});

	it('refuses a weak password and leaves the link open', async () => {
		const link = await addInes();
		for (const weak of ['too short', 'ines halvorsen 12345', DEMO_PASSWORD]) {
			const set = await people.setPasswordByLink(link, weak);
			expect(set).toMatchObject({ ok: false, problem: { code: 'invalid', errors: [{ field: 'password' }] } });
		}
		expect(await people.setPasswordByLink(link, PASSWORD)).toMatchObject({ ok: true });
	});

	it('lets one of two at once through', async () => {
		const link = await addInes();
		const results = await Promise.all([
			people.setPasswordByLink(link, PASSWORD),
			people.setPasswordByLink(link, `${PASSWORD} too`)
		]);
		expect(results.filter((result) => result.ok)).toHaveLength(1);
	});

	it('opens the door with the new password and ends the sessions of before', async () => {
		const link = await addInes();
		const { id } = await PersonModel.findOne({ where: { email: INPUT.email }, rejectOnEmpty: true });
		const cookie = await sessions.create(id, null);
		await people.setPasswordByLink(link, PASSWORD);
		expect((await sessions.validate(cookie.value)).actor).toBeNull();
		expect(await people.signIn({ email: INPUT.email, password: PASSWORD, address })).toMatchObject({
			ok: true,
			value: { name: INPUT.name }
		});
	});
});

describe('changePassword', () => {
	async function makeMara(): Promise<Actor> {
		return (await makePerson({ email: 'mara@northmoor.example', passwordHash: await hashPassword(PASSWORD) }))
			.actor;
	}

	it('refuses a wrong present password, names the field and limits the tries', async () => {
		const actor = await makeMara();
		const input = { current: 'not it', password: 'harbour crane weather seven', address };
		for (let count = 0; count < 8; count += 1) {
			const changed = await people.changePassword(actor, input);
			expect(changed).toMatchObject({ ok: false, problem: { errors: [{ field: 'current' }] } });
		}
		expect(await people.changePassword(actor, { ...input, current: PASSWORD })).toMatchObject({
			ok: false,
			problem: { code: 'rate_limited' }
		});
	});

	it('changes it and ends every session', async () => {
		const actor = await makeMara();
		const cookie = await sessions.create(actor.personId ?? 0, null);
		const password = 'harbour crane weather seven';
		expect(await people.changePassword(actor, { current: PASSWORD, password, address })).toMatchObject({
			ok: true
		});
		expect((await sessions.validate(cookie.value)).actor).toBeNull();
		expect(await people.signIn({ email: 'mara@northmoor.example', password, address })).toMatchObject({
			ok: true
		});
	});
});

describe("the demonstration's password", () => {
	const email = 'demo@northmoor.example';
	beforeEach(async () => {
		await makePerson({ email, passwordHash: await hashPassword(DEMO_PASSWORD) });
	});

	it.each(['0.0.0.0', '192.0.2.10', '::'])('opens nothing while the server listens on %s', async (host) => {
		overrideConfig({ host });
		const signIn = await people.signIn({ email, password: DEMO_PASSWORD, address });
		expect(signIn).toMatchObject({ ok: false, problem: { code: 'unauthenticated' } });
	});

	it.each(['127.0.0.1', 'localhost', '::1'])('opens while it listens on %s', async (host) => {
		overrideConfig({ host });
		expect(await people.signIn({ email, password: DEMO_PASSWORD, address })).toMatchObject({ ok: true });
	});
});
