import { describe, expect, it } from 'vitest';
import { SYSTEM, type Role } from '$lib/domain/person/person';
import { PersonModel } from '$lib/server/db/models/person';
import { TokenModel } from '$lib/server/db/models/token';
import { write } from '$lib/server/db/transaction';
import * as people from '$lib/server/people/people-service';
import * as tokens from '$lib/server/sessions/tokens-service';
import { makePerson } from '../../../fixtures/factories/person';
import { withDatabase } from '../../../fixtures/database';

withDatabase();

async function makeToken(ownerRole: Role, role: Role) {
	const owner = await makePerson({ role: ownerRole });
	const made = await tokens.create(owner.actor, { personId: owner.id, name: 'log shipper', role, days: 30 });
	if (!made.ok) throw new Error(made.problem.detail);
	return { owner, ...made.value };
}

describe('create', () => {
	it('refuses a role higher than its owner has', async () => {
		const { actor, id } = await makePerson({ role: 'responder' });
		const made = await tokens.create(actor, { personId: id, name: 'x', role: 'curator', days: 1 });
		expect(made).toMatchObject({ ok: false, problem: { code: 'invalid', errors: [{ field: 'role' }] } });
	});

	it("refuses a token in somebody else's name", async () => {
		const { actor } = await makePerson({ role: 'curator' });
		const other = await makePerson({ role: 'reader' });
		const made = await tokens.create(actor, { personId: other.id, name: 'x', role: 'reader', days: 1 });
		expect(made).toMatchObject({ ok: false, problem: { code: 'forbidden' } });
	});

	it('keeps nothing from which the token could be read', async () => {
		const { token } = await makeToken('reader', 'reader');
		expect(token).toMatch(/^cw_[\w-]{43}$/);
		const row = await TokenModel.findOne({ raw: true, rejectOnEmpty: true });
		expect(JSON.stringify(row)).not.toContain(token.slice(3));
	});
});

describe('validate', () => {
	it('knows no token that was never made, has another prefix or is a hash', async () => {
		const { token } = await makeToken('reader', 'reader');
		const row = await TokenModel.findOne({ rejectOnEmpty: true });
		for (const wrong of ['', 'cw_', `${token}x`, token.slice(3), `cw_${row.tokenHash}`]) {
			expect(await tokens.validate(wrong)).toBeNull();
		}
	});

	it('knows no token that is expired or taken back', async () => {
		const expired = await makeToken('reader', 'reader');
		await write(() => TokenModel.update({ expiresAt: '2026-01-01T00:00:00.000Z' }, { where: {} }));
		expect(await tokens.validate(expired.token)).toBeNull();
		const revoked = await makeToken('reader', 'reader');
		await tokens.revoke(revoked.owner.actor, revoked.record.id);
		expect(await tokens.validate(revoked.token)).toBeNull();
	});

	it('acts with the role of the token, and with less once its owner has less', async () => {
		const { token, owner } = await makeToken('curator', 'responder');
		expect(await tokens.validate(token)).toMatchObject({
			role: 'responder',
			personId: owner.id,
			via: 'token'
		});
		await write(() => PersonModel.update({ role: 'reader' }, { where: { id: owner.id } }));
		expect(await tokens.validate(token)).toMatchObject({ role: 'reader' });
	});

	it('notes its use, but not at each call', async () => {
		const { token } = await makeToken('reader', 'reader');
		await tokens.validate(token);
		const first = (await TokenModel.findOne({ rejectOnEmpty: true })).lastUsedAt;
		await tokens.validate(token);
		expect(first).not.toBeNull();
		expect((await TokenModel.findOne({ rejectOnEmpty: true })).lastUsedAt).toBe(first);
	});

	it('stops at once when its owner leaves', async () => {
		const { token, owner } = await makeToken('responder', 'responder');
		await people.update(SYSTEM, owner.id, 1, { active: false });
		expect(await tokens.validate(token)).toBeNull();
	});
});

describe('revoke', () => {
	it("finds nobody else's token", async () => {
		const { record, token } = await makeToken('reader', 'reader');
		const { actor } = await makePerson({ role: 'curator' });
		expect(await tokens.revoke(actor, record.id)).toMatchObject({
			ok: false,
			problem: { code: 'not_found' }
		});
		expect(await tokens.validate(token)).not.toBeNull();
	});
});
