import { describe, expect, it } from 'vitest';
import { SYSTEM, type Actor, type Role } from '$lib/domain/person/person';
import { AuditModel } from '$lib/server/db/models/audit';
import { IncidentModel } from '$lib/server/db/models/incident';
import { PersonModel } from '$lib/server/db/models/person';
import * as people from '$lib/server/people/people-service';
import * as sessions from '$lib/server/sessions/sessions-service';
import * as tokens from '$lib/server/sessions/tokens-service';
import { withDatabase } from '../../../fixtures/database';
import { makeIncident } from '../../../fixtures/factories/incident';
import { makePerson } from '../../../fixtures/factories/person';

withDatabase();

/** Somebody who can sign in. */
function makeMember(role: Role, name?: string): Promise<{ id: number; actor: Actor }> {
	return makePerson({ role, passwordHash: 'set', ...(name === undefined ? {} : { name }) });
}

describe('update', () => {
	it.each(['reader', 'responder', 'curator'] as const)('refuses a %s', async (role) => {
		const { id } = await makeMember('reader');
		const { actor } = await makeMember(role);
		const changed = await people.update(actor, id, 1, { role: 'administrator' });
		expect(changed).toMatchObject({ ok: false, problem: { code: 'forbidden' } });
		expect((await PersonModel.findByPk(id))?.role).toBe('reader');
	});

	it('refuses to take the role of the last administrator, with the reason', async () => {
		const { id, actor } = await makeMember('administrator', 'Ines Halvorsen');
		const changed = await people.update(actor, id, 1, { role: 'curator' });
		expect(changed).toMatchObject({
			ok: false,
			problem: { code: 'refused', reasons: [expect.stringContaining('Ines Halvorsen is the last')] }
		});
		expect((await PersonModel.findByPk(id))?.role).toBe('administrator');
	});

	it('refuses to close the account of the last administrator', async () => {
		const { id, actor } = await makeMember('administrator');
		const changed = await people.update(actor, id, 1, { active: false });
		expect(changed).toMatchObject({ ok: false, problem: { code: 'refused' } });
	});

	it('counts no administrator who left or has no password yet', async () => {
		const { id, actor } = await makeMember('administrator');
		await makePerson({ role: 'administrator', passwordHash: null });
		await makePerson({
			role: 'administrator',
			passwordHash: 'set',
			deactivatedAt: '2026-02-01T00:00:00.000Z'
		});
		const changed = await people.update(actor, id, 1, { active: false });
		expect(changed).toMatchObject({ ok: false, problem: { code: 'refused' } });
	});

	it('lets one of two administrators who leave at once stay', async () => {
		const one = await makeMember('administrator');
		const other = await makeMember('administrator');
		const results = await Promise.all([
			people.update(one.actor, one.id, 1, { role: 'reader' }),
			people.update(other.actor, other.id, 1, { active: false })
		]);
		expect(results.filter((result) => result.ok)).toHaveLength(1);
	});

	it('overwrites nothing of a newer revision, and hands over what stands there', async () => {
		const { id } = await makeMember('reader');
		await people.update(SYSTEM, id, 1, { role: 'curator' });
		const late = await people.update(SYSTEM, id, 1, { role: 'responder' });
		expect(late).toMatchObject({
			ok: false,
			problem: { code: 'stale', current: { role: 'curator', revision: 2 } }
		});
	});

	it('gives another role, which is in the audit trail with the one before', async () => {
		const { actor } = await makeMember('administrator');
		const { id } = await makeMember('reader');
		const changed = await people.update(actor, id, 1, { role: 'curator' });
		expect(changed).toMatchObject({ ok: true, value: { role: 'curator', revision: 2 } });
		const line = await AuditModel.findOne({ where: { action: 'person.role' }, rejectOnEmpty: true });
		expect(line).toMatchObject({ actorId: actor.personId, subject: `person:${id}` });
		expect(JSON.parse(line.detail)).toEqual({ from: 'reader', to: 'curator' });
	});

	it('leaves no trace of a change that changes nothing', async () => {
		const { id } = await makeMember('reader');
		const changed = await people.update(SYSTEM, id, 1, { role: 'reader', active: true });
		expect(changed).toMatchObject({ ok: true, value: { revision: 1 } });
		expect(await AuditModel.count()).toBe(0);
	});

	it('closes an account with its sessions and tokens, and leaves what the person wrote', async () => {
		const { id, actor } = await makeMember('responder', 'Jonas Lindqvist');
		const incident = await makeIncident({ createdById: id, ownerId: id });
		const cookie = await sessions.create(id, null);
		const token = await tokens.create(actor, { personId: id, name: 'alerts', role: 'reader', days: 1 });
		const closed = await people.update(SYSTEM, id, 1, { active: false });
		expect(closed).toMatchObject({ ok: true, value: { active: false } });
		expect((await sessions.validate(cookie.value)).actor).toBeNull();
		expect(token.ok && (await tokens.validate(token.value.token))).toBeNull();
		expect(await IncidentModel.findByPk(incident)).toMatchObject({ createdById: id, ownerId: id });
	});

	it('opens an account again, but none of its tokens', async () => {
		const { id, actor } = await makeMember('responder');
		const token = await tokens.create(actor, { personId: id, name: 'alerts', role: 'reader', days: 1 });
		await people.update(SYSTEM, id, 1, { active: false });
		const opened = await people.update(SYSTEM, id, 2, { active: true });
		expect(opened).toMatchObject({ ok: true, value: { active: true, deactivatedAt: null, revision: 3 } });
		expect(token.ok && (await tokens.validate(token.value.token))).toBeNull();
	});
});

describe('listPage', () => {
	it('refuses a curator', async () => {
		const { actor } = await makeMember('curator');
		expect(await people.listPage(actor, { limit: 50 })).toMatchObject({ problem: { code: 'forbidden' } });
	});

	it('lists everybody once over all pages, by name, those who left last', async () => {
		for (const name of ['bo', 'Ada', 'Cleo', 'ada']) await makePerson({ name });
		await makePerson({ name: 'Aaron', deactivatedAt: '2026-02-01T00:00:00.000Z' });
		const names: string[] = [];
		let cursor: string | undefined;
		do {
			const page = await people.listPage(SYSTEM, { limit: 2, cursor });
			if (!page.ok) throw new Error(page.problem.detail);
			names.push(...page.value.items.map(({ name }) => name));
			cursor = page.value.next ?? undefined;
		} while (cursor !== undefined);
		expect(names).toEqual(['Ada', 'ada', 'bo', 'Cleo', 'Aaron']);
	});

	it('tells when somebody signed in last, and that others never did', async () => {
		const { id } = await makePerson({ name: 'Ada' });
		await makePerson({ name: 'Bo' });
		await sessions.create(id, null);
		const page = await people.listPage(SYSTEM, { limit: 50, active: true });
		if (!page.ok) throw new Error(page.problem.detail);
		expect(page.value.items.map(({ lastSignInAt }) => lastSignInAt)).toEqual([expect.any(String), null]);
	});
});
