import { describe, expect, it } from 'vitest';
import { SYSTEM } from '$lib/domain/person/person';
import { invitationInput, type InvitationInput } from '$lib/domain/person/person-input';
import { AuditModel } from '$lib/server/db/models/audit';
import { InvitationModel } from '$lib/server/db/models/invitation';
import { PersonModel } from '$lib/server/db/models/person';
import { write } from '$lib/server/db/transaction';
import * as invitations from '$lib/server/people/invitations-service';
import { withDatabase } from '../../../fixtures/database';
import { makeActor, makePerson } from '../../../fixtures/factories/person';
import { countMailsTo, readMailedLink } from '../../../fixtures/outbox';
import { ORIGIN, request } from '../../../fixtures/request';

const EMAIL = 'ines@northmoor.example';
const INPUT = { email: EMAIL, role: 'responder' as const };
const CHOSEN = { name: 'Ines Halvorsen', password: 'lantern gravel otter nine' };

withDatabase();

async function invite(input: InvitationInput = INPUT): Promise<{ id: number; link: string }> {
	const invited = await invitations.invite(SYSTEM, input);
	if (!invited.ok) throw new Error(invited.problem.detail);
	return { id: invited.value.id, link: await readMailedLink(input.email) };
}

function secretOf(link: string): string {
	return link.replace('/invitation/', '');
}

function send(link: string, fields: Record<string, string> = CHOSEN): Promise<Response> {
	return request('POST', link, { body: new URLSearchParams(fields), headers: { origin: ORIGIN } });
}

describe('invite', () => {
	it.each(['reader', 'responder', 'curator'] as const)('refuses a %s', async (role) => {
		const invited = await invitations.invite(await makeActor(role), INPUT);
		expect(invited).toMatchObject({ ok: false, problem: { code: 'forbidden' } });
		expect(await countMailsTo(EMAIL)).toBe(0);
	});

	it.each(['a@b\r\nBcc: c@d', 'a,b@c', 'a@b;c@d', '<a@b>', 'a b@c', 'a@b\0', '"a"@b'])(
		'takes no address like %j',
		(email) => {
			expect(invitationInput.safeParse({ email, role: 'reader' }).success).toBe(false);
		}
	);

	it('refuses an address that somebody here has', async () => {
		await makePerson({ email: EMAIL });
		expect(await invitations.invite(SYSTEM, INPUT)).toMatchObject({ problem: { code: 'refused' } });
	});

	it('says of somebody who left that their account can be opened again', async () => {
		await makePerson({ email: EMAIL, deactivatedAt: '2026-02-01T00:00:00.000Z' });
		const invited = await invitations.invite(SYSTEM, INPUT);
		expect(invited).toMatchObject({ problem: { reasons: [expect.stringContaining('open it again')] } });
	});

	it('refuses a second open invitation for one address, also of two at once', async () => {
		const results = await Promise.all([invitations.invite(SYSTEM, INPUT), invitations.invite(SYSTEM, INPUT)]);
		expect(results.filter(({ ok }) => ok)).toHaveLength(1);
		expect(await countMailsTo(EMAIL)).toBe(1);
	});

	it('keeps the hash of the link alone and audits who invited whom', async () => {
		const actor = await makeActor('administrator');
		await invitations.invite(actor, INPUT);
		const secret = secretOf(await readMailedLink(EMAIL));
		const [row] = await InvitationModel.findAll({ raw: true });
		expect(JSON.stringify(row)).not.toContain(secret);
		const line = await AuditModel.findOne({ where: { action: 'invitation.create' }, rejectOnEmpty: true });
		expect(line.actorId).toBe(actor.personId);
		expect(line.detail).not.toContain(secret);
		expect(JSON.parse(line.detail)).toEqual(INPUT);
	});
});

describe('the invitation page', () => {
	const gone = 'used already, has run out or was taken back';

	async function expectGone(link: string): Promise<void> {
		const before = await PersonModel.count();
		const page = await request('GET', link);
		expect(page.status).toBe(404);
		expect(await page.text()).toContain(gone);
		const sent = await send(link);
		expect(sent.status).toBe(404);
		expect(sent.headers.getSetCookie()).toEqual([]);
		expect(await PersonModel.count()).toBe(before);
	}

	it('opens for no secret that was never mailed', async () => {
		await invite();
		await expectGone('/invitation/never-was');
	});

	it('opens no more after its seven days', async () => {
		const { link } = await invite();
		await write(() => InvitationModel.update({ expiresAt: '2026-01-01T00:00:00.000Z' }, { where: {} }));
		await expectGone(link);
	});

	it('opens no more once it was taken back', async () => {
		const { id, link } = await invite();
		await invitations.revoke(SYSTEM, id);
		await expectGone(link);
	});

	it('opens no more once a newer link was mailed', async () => {
		const { id, link } = await invite();
		await invitations.resend(SYSTEM, id);
		await expectGone(link);
		expect((await request('GET', await readMailedLink(EMAIL))).status).toBe(200);
	});

	it('opens once', async () => {
		const { link } = await invite();
		expect((await send(link)).status).toBe(303);
		await expectGone(link);
	});

	it('lets one of two at once in', async () => {
		const { link } = await invite();
		const secret = secretOf(link);
		const results = await Promise.all([
			invitations.accept(secret, CHOSEN),
			invitations.accept(secret, { ...CHOSEN, name: 'Somebody Else' })
		]);
		expect(results.filter(({ ok }) => ok)).toHaveLength(1);
		expect(await PersonModel.count({ where: { email: EMAIL } })).toBe(1);
	});

	it("gives the invited address and role, whatever else is sent, and nobody else's invitation", async () => {
		const { link } = await invite();
		const other = await invite({ email: 'bo@northmoor.example', role: 'reader' });
		const fields = { ...CHOSEN, email: 'boss@northmoor.example', role: 'administrator' };
		expect((await send(link, fields)).status).toBe(303);
		expect(await PersonModel.findOne()).toMatchObject({ email: EMAIL, role: 'responder' });
		expect((await request('GET', other.link)).status).toBe(200);
	});

	it('refuses a weak password, names the field, gives the name back and stays open', async () => {
		const { link } = await invite();
		const response = await send(link, { name: 'Ines Halvorsen', password: 'too short' });
		expect(response.status).toBe(400);
		const text = await response.text();
		expect(JSON.parse(text).data.issues).toHaveProperty('password');
		expect(text).toContain('Ines Halvorsen');
		expect(text).not.toContain('too short');
		expect((await send(link)).status).toBe(303);
	});

	it('signs the newcomer in and says so in the audit trail', async () => {
		const { link } = await invite();
		const response = await send(link);
		expect(response.headers.getSetCookie().join()).toContain('catchwater_session=');
		const person = await PersonModel.findOne({ rejectOnEmpty: true });
		expect(await AuditModel.findOne({ where: { action: 'person.join' } })).toMatchObject({
			actorId: person.id,
			actorName: CHOSEN.name
		});
	});
});

describe('resend and revoke', () => {
	it.each(['resend', 'revoke'] as const)('%s refuses a curator', async (verb) => {
		const { id } = await invite();
		const changed = await invitations[verb](await makeActor('curator'), id);
		expect(changed).toMatchObject({ problem: { code: 'forbidden' } });
	});

	it.each(['resend', 'revoke'] as const)('%s refuses an invitation that was used', async (verb) => {
		const { id, link } = await invite();
		await invitations.accept(secretOf(link), CHOSEN);
		expect(await invitations[verb](SYSTEM, id)).toMatchObject({ problem: { code: 'refused' } });
	});

	it('send again what has run out, for its full time', async () => {
		const { id } = await invite();
		await write(() => InvitationModel.update({ expiresAt: '2026-01-01T00:00:00.000Z' }, { where: {} }));
		expect(await invitations.read(SYSTEM, id)).toMatchObject({ value: { state: 'expired' } });
		expect(await invitations.resend(SYSTEM, id)).toMatchObject({ value: { state: 'open', revision: 2 } });
		expect(await countMailsTo(EMAIL)).toBe(2);
	});

	it('free the address for a new invitation', async () => {
		const { id } = await invite();
		expect(await invitations.revoke(SYSTEM, id)).toMatchObject({ value: { state: 'revoked' } });
		expect(await invitations.invite(SYSTEM, INPUT)).toMatchObject({ ok: true });
	});
});
