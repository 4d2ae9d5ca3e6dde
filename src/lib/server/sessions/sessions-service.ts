import type { Cookie } from 'lucia';
import { can } from '$lib/domain/person/can';
import type { Actor } from '$lib/domain/person/person';
import { fail, ok, type Outcome } from '$lib/domain/problem';
import * as audit from '../audit/audit-service';
import { write } from '../db/transaction';
import { hashSecret } from '../secrets';
import { lucia } from './lucia';
import * as store from './session-store';

/** `lastSeenAt` is for people to look at: writing it at each request would cost more than it says. */
const SEEN_EVERY_MS = 5 * 60 * 1000;
const USER_AGENT_LENGTH = 300;

/** A signed-in browser as its person sees it. */
export interface SignIn {
	/** Hash of its id: names it without opening it. */
	idHash: string;
	createdAt: string;
	lastSeenAt: string;
	expiresAt: string;
	userAgent: string | null;
	/** Whether it is the one that asks. */
	isThisOne: boolean;
}

/** Signs a person in: a new session with a new id, and the cookie that carries it. */
export async function create(personId: number, userAgent: string | null): Promise<Cookie> {
	const now = new Date().toISOString();
	const session = await lucia().createSession(personId, {
		createdAt: now,
		lastSeenAt: now,
		userAgent: userAgent?.slice(0, USER_AGENT_LENGTH) ?? null
	});
	return lucia().createSessionCookie(session.id);
}

/**
 * Who a cookie stands for. `actor` is null where it is unknown or expired or the person left; `cookie` is
 * what the browser has to be told: a later end, or that it is over (null: nothing).
 */
export async function validate(id: string): Promise<{ actor: Actor | null; cookie: Cookie | null }> {
	const { session, user } = await lucia().validateSession(id);
	if (!session) return { actor: null, cookie: lucia().createBlankSessionCookie() };
	if (Date.now() - Date.parse(session.lastSeenAt) > SEEN_EVERY_MS) {
		await store.setLastSeen(hashSecret(id), new Date().toISOString());
	}
	return {
		actor: { personId: user.id, name: user.name, role: user.role, via: 'session', tokenId: null },
		cookie: session.fresh ? lucia().createSessionCookie(session.id) : null
	};
}

/** Ends a session for good; answers the cookie that clears the browser's. */
export async function end(id: string): Promise<Cookie> {
	await lucia().invalidateSession(id);
	return lucia().createBlankSessionCookie();
}

/** One's own signed-in browsers, last seen first. `currentId` is the cookie's value. */
export async function list(actor: Actor, currentId: string | null): Promise<Outcome<SignIn[]>> {
	if (!can(actor, 'account.own') || actor.personId === null) return ok([]);
	const currentHash = currentId === null ? null : hashSecret(currentId);
	const records = await store.listSessions(actor.personId, new Date().toISOString());
	return ok(
		records.map(({ personId: _personId, ...record }) => ({
			...record,
			isThisOne: record.idHash === currentHash
		}))
	);
}

/** Ends one of one's own sessions, by its hash. */
export async function revoke(actor: Actor, idHash: string): Promise<Outcome<null>> {
	const { personId } = actor;
	if (!can(actor, 'account.own') || personId === null) return fail('forbidden', 'Only a person signs in.');
	return write(async (t) => {
		const ended = await store.deleteSessionOf(personId, idHash, t);
		if (!ended) return fail('not_found', 'This sign-in has ended already.');
		await audit.record(actor, 'session.revoke', `person:${personId}`, {}, t);
		return ok(null);
	});
}

/** Ends all one's own sessions but the one that asks; answers how many. `currentId` is the cookie's value. */
export async function revokeOthers(actor: Actor, currentId: string | null): Promise<Outcome<number>> {
	const { personId } = actor;
	if (!can(actor, 'account.own') || personId === null) return fail('forbidden', 'Only a person signs in.');
	const spared = currentId === null ? null : hashSecret(currentId);
	return write(async (t) => {
		const ended = await store.deleteOtherSessions(personId, spared, t);
		if (ended > 0) await audit.record(actor, 'session.revoke', `person:${personId}`, { sessions: ended }, t);
		return ok(ended);
	});
}

/** Removes sessions that have expired; called now and then by the server. */
export function deleteExpired(): Promise<void> {
	return lucia().deleteExpiredSessions();
}
