import type { Page } from '$lib/domain/page';
import { can, includesRole } from '$lib/domain/person/can';
import type { Actor, Role } from '$lib/domain/person/person';
import type { TokenQuery } from '$lib/domain/person/people-query';
import type { TokenInput } from '$lib/domain/person/person-input';
import { fail, ok, type Outcome } from '$lib/domain/problem';
import { cutPage, readCursor } from '../api/cursor';
import * as audit from '../audit/audit-service';
import { write } from '../db/transaction';
import { findById } from '../people/people-store';
import { hashSecret, makeSecret } from '../secrets';
import * as store from './token-store';
import type { TokenRecord } from './token-store';

export type { TokenRecord };

const DAY_MS = 24 * 60 * 60 * 1000;
const USED_EVERY_MS = 5 * 60 * 1000;
/** Lets secret scanners and people see what it is. */
const PREFIX = 'cw_';

/** Whose tokens the actor may make: their own through a session, anybody's as administrator or system. */
function mayManage(actor: Actor, personId: number): boolean {
	if (can(actor, 'people.manage')) return true;
	return can(actor, 'account.own') && actor.personId === personId;
}

/**
 * Makes a token for a person; the answer is the only place where it is ever shown. Its role is at most the
 * person's, and at most the actor's where a token makes a token.
 */
export async function create(
	actor: Actor,
	input: TokenInput & { personId: number }
): Promise<Outcome<{ token: string; record: TokenRecord }>> {
	if (!mayManage(actor, input.personId)) return fail('forbidden', 'Tokens are made for oneself.');
	const person = await findById(input.personId);
	if (!person || person.deactivatedAt !== null) return fail('not_found', 'There is no such person.');
	if (!includesRole(person.role, input.role) || !includesRole(actor.role, input.role)) {
		const message = `A token's role is no higher than its owner's (${person.role}).`;
		return fail('invalid', message, { errors: [{ field: 'role', message }] });
	}
	const token = PREFIX + makeSecret();
	const now = Date.now();
	const fields = {
		personId: person.id,
		name: input.name,
		role: input.role,
		createdAt: new Date(now).toISOString(),
		expiresAt: new Date(now + input.days * DAY_MS).toISOString()
	};
	return write(async (t) => {
		const id = await store.insertToken({ ...fields, tokenHash: hashSecret(token) }, t);
		await audit.record(actor, 'token.create', `token:${id}`, { name: input.name, role: input.role }, t);
		return ok({ token, record: { ...fields, id, lastUsedAt: null, revokedAt: null } });
	});
}

/** The lower of two roles: an owner who lost a role takes it from their tokens too. */
function lowerRole(a: Role, b: Role): Role {
	return includesRole(a, b) ? b : a;
}

/** Who a token stands for; null where it is unknown, expired or revoked, or its owner left. */
export async function validate(token: string): Promise<Actor | null> {
	if (!token.startsWith(PREFIX)) return null;
	const now = new Date();
	const found = await store.findToken(hashSecret(token), now.toISOString());
	if (!found) return null;
	if (found.lastUsedAt === null || now.getTime() - Date.parse(found.lastUsedAt) > USED_EVERY_MS) {
		await store.setLastUsed(found.id, now.toISOString());
	}
	return {
		personId: found.personId,
		name: found.ownerName,
		role: lowerRole(found.role, found.ownerRole),
		via: 'token',
		tokenId: found.id
	};
}

/** One's own tokens, newest first. */
export async function list(actor: Actor): Promise<Outcome<TokenRecord[]>> {
	if (!can(actor, 'account.own') || actor.personId === null) return ok([]);
	return ok(await store.listTokens(actor.personId));
}

/** A token that the actor may see; another's is not there for them. */
async function findVisible(actor: Actor, id: number): Promise<Outcome<TokenRecord>> {
	const token = await store.findTokenById(id);
	return token && mayManage(actor, token.personId)
		? ok(token)
		: fail('not_found', `You have no token ${id}.`);
}

/** One token: one's own; anybody's for an administrator. */
export function read(actor: Actor, id: number): Promise<Outcome<TokenRecord>> {
	return findVisible(actor, id);
}

/**
 * A page of tokens, newest first: one's own, or those of a person whom the query names, which takes an
 * administrator where it is somebody else.
 */
export async function listPage(actor: Actor, query: TokenQuery): Promise<Outcome<Page<TokenRecord>>> {
	const personId = query.person ?? actor.personId;
	if (personId === null || !mayManage(actor, personId)) {
		return fail('forbidden', "Only an administrator sees others' tokens.");
	}
	const name = `tokens ${personId}`;
	const after = readCursor(name, query.cursor);
	if (!after.ok) return after;
	const [found, total] = await Promise.all([
		store.listTokenPage(personId, after.value?.id ?? null, query.limit + 1),
		store.countTokens(personId)
	]);
	const { rows, next } = cutPage(found, query.limit, name, ({ id }) => ({ key: id, id }));
	return ok({ items: rows, next, total });
}

/** Takes back a token at once: one's own; anybody's for an administrator. */
export async function revoke(actor: Actor, id: number): Promise<Outcome<null>> {
	return write(async (t) => {
		const found = await findVisible(actor, id);
		if (!found.ok) return found;
		const revoked = await store.revokeToken(id, new Date().toISOString(), t);
		if (!revoked) return fail('not_found', 'This token was taken back before.');
		await audit.record(actor, 'token.revoke', `token:${id}`, { person: found.value.personId }, t);
		return ok(null);
	});
}
