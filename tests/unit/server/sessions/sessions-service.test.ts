import { afterEach, describe, expect, it, vi } from 'vitest';
import { SYSTEM } from '$lib/domain/person/person';
import { SessionModel } from '$lib/server/db/models/session';
import * as people from '$lib/server/people/people-service';
import { ABSOLUTE_MS, IDLE_MS } from '$lib/server/sessions/session-adapter';
import * as sessions from '$lib/server/sessions/sessions-service';
import { makePerson } from '../../../fixtures/factories/person';
import { withDatabase } from '../../../fixtures/database';

withDatabase();

afterEach(() => {
	vi.useRealTimers();
});

/** Moves the clock alone: timers stay real, since the database waits on them. */
function goForward(ms: number): void {
	vi.useFakeTimers({ now: Date.now() + ms, toFake: ['Date'] });
}

const MINUTE_MS = 60_000;

describe('validate', () => {
	it('knows no id that was never given and asks the browser to forget it', async () => {
		const { actor, cookie } = await sessions.validate('never-given');
		expect(actor).toBeNull();
		expect(cookie?.value).toBe('');
	});

	it('keeps only a hash of the id, which opens nothing', async () => {
		const { id } = await makePerson();
		const { value } = await sessions.create(id, 'Vitest');
		const row = await SessionModel.findOne({ rejectOnEmpty: true });
		expect(row.idHash).not.toContain(value);
		expect((await sessions.validate(row.idHash)).actor).toBeNull();
	});

	it('ends a session that was not used for so long', async () => {
		const { id } = await makePerson();
		const { value } = await sessions.create(id, null);
		goForward(IDLE_MS + MINUTE_MS);
		expect((await sessions.validate(value)).actor).toBeNull();
		expect(await SessionModel.count()).toBe(0);
	});

	it('lives on while it is used, and ends all the same at its absolute end', async () => {
		const { id, actor } = await makePerson({ role: 'curator' });
		const { value } = await sessions.create(id, null);
		const step = IDLE_MS * 0.75;
		for (let age = step; age < ABSOLUTE_MS; age += step) {
			goForward(step);
			expect((await sessions.validate(value)).actor).toEqual(actor);
		}
		goForward(step);
		expect((await sessions.validate(value)).actor).toBeNull();
	});

	it('ends at once when the person leaves', async () => {
		const { id } = await makePerson();
		const { value } = await sessions.create(id, null);
		await people.update(SYSTEM, id, 1, { active: false });
		expect((await sessions.validate(value)).actor).toBeNull();
		expect(await SessionModel.count()).toBe(0);
	});
});

describe('revoke', () => {
	it("ends no session of somebody else's", async () => {
		const mine = await makePerson();
		const theirs = await makePerson();
		const { value } = await sessions.create(theirs.id, null);
		const row = await SessionModel.findOne({ rejectOnEmpty: true });
		expect(await sessions.revoke(mine.actor, row.idHash)).toMatchObject({ ok: false });
		expect((await sessions.validate(value)).actor).not.toBeNull();
	});

	it('ends the one that is named, and lists say which one asks', async () => {
		const { id, actor } = await makePerson();
		const old = await sessions.create(id, 'an old telephone');
		const present = await sessions.create(id, 'this browser');
		const listed = await sessions.list(actor, present.value);
		if (!listed.ok) throw new Error(listed.problem.detail);
		expect(listed.value.filter((signIn) => signIn.isThisOne).map((signIn) => signIn.userAgent)).toEqual([
			'this browser'
		]);
		const other = listed.value.find((signIn) => !signIn.isThisOne);
		await sessions.revoke(actor, other?.idHash ?? '');
		expect((await sessions.validate(old.value)).actor).toBeNull();
		expect((await sessions.validate(present.value)).actor).not.toBeNull();
	});
});

describe('revokeOthers', () => {
	it("ends no session of somebody else's", async () => {
		const { actor } = await makePerson();
		const theirs = await sessions.create((await makePerson()).id, null);
		expect(await sessions.revokeOthers(actor, null)).toEqual({ ok: true, value: 0 });
		expect((await sessions.validate(theirs.value)).actor).not.toBeNull();
	});

	it('spares the one that asks', async () => {
		const { id, actor } = await makePerson();
		const old = await sessions.create(id, 'an old telephone');
		const present = await sessions.create(id, 'this browser');
		expect(await sessions.revokeOthers(actor, present.value)).toEqual({ ok: true, value: 1 });
		expect((await sessions.validate(old.value)).actor).toBeNull();
		expect((await sessions.validate(present.value)).actor).toEqual(actor);
	});
});
