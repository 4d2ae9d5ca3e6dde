import type { Adapter, DatabaseSession } from 'lucia';
import { write } from '../db/transaction';
import { hashSecret } from '../secrets';
import * as store from './session-store';

const HOUR_MS = 60 * 60 * 1000;
/** Unused for so long, a session ends (OWASP ASVS v5.0.0-7.3.1). A night shift and its handover fit in. */
export const IDLE_MS = 24 * HOUR_MS;
/** Used or not, a session ends after this (v5.0.0-7.3.2). */
export const ABSOLUTE_MS = 14 * 24 * HOUR_MS;

function absoluteEnd(createdAt: string): number {
	return Date.parse(createdAt) + ABSOLUTE_MS;
}

function toDatabaseSession(id: string, record: store.SessionRecord): DatabaseSession {
	const { personId, expiresAt, createdAt, lastSeenAt, userAgent } = record;
	return {
		id,
		userId: personId,
		expiresAt: new Date(Math.min(Date.parse(expiresAt), absoluteEnd(createdAt))),
		attributes: { createdAt, lastSeenAt, userAgent }
	};
}

/**
 * Lucia's view of the sessions table, in which only hashes of ids are kept. Lucia passes the id on that it
 * gets from here, so `getSessionAndUser` hands it back as it came, unhashed.
 */
export const sessionAdapter: Adapter = {
	async getSessionAndUser(id) {
		const record = await store.findSession(hashSecret(id));
		if (!record) return [null, null];
		const { personId, name, role, deactivatedAt } = record;
		const user = deactivatedAt === null ? { id: personId, attributes: { name, role } } : null;
		return [toDatabaseSession(id, record), user];
	},
	async getUserSessions(personId) {
		const records = await store.listSessions(personId, new Date().toISOString());
		return records.map((record) => toDatabaseSession(record.idHash, record));
	},
	async setSession(session) {
		await store.insertSession({
			idHash: hashSecret(session.id),
			personId: session.userId,
			expiresAt: session.expiresAt.toISOString(),
			...session.attributes
		});
	},
	async updateSessionExpiration(id, expiresAt) {
		const record = await store.findSession(hashSecret(id));
		if (!record) return;
		const next = new Date(Math.min(expiresAt.getTime(), absoluteEnd(record.createdAt))).toISOString();
		// Near its absolute end a session looks due for longer life at every request: there is none to give.
		if (next > record.expiresAt) await store.setExpiry(record.idHash, next);
	},
	async deleteSession(id) {
		await store.deleteSession(hashSecret(id));
	},
	async deleteUserSessions(personId) {
		await write((t) => store.deleteSessionsOf(personId, t));
	},
	async deleteExpiredSessions() {
		await store.deleteExpired(new Date().toISOString());
	}
};
