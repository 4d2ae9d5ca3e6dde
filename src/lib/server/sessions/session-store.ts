import { Op } from 'sequelize';
import type { Role } from '$lib/domain/person/person';
import { PersonModel } from '../db/models/person';
import { SessionModel } from '../db/models/session';
import { execute, select, selectOne } from '../db/query';
import { write, type Transaction } from '../db/transaction';

export interface SessionRecord {
	idHash: string;
	personId: number;
	createdAt: string;
	expiresAt: string;
	lastSeenAt: string;
	userAgent: string | null;
}

/** A session with what is needed of its person, who must be active; null where there is none. */
export function findSession(
	idHash: string
): Promise<(SessionRecord & { name: string; role: Role; deactivatedAt: string | null }) | null> {
	return selectOne(
		`SELECT sessions.*, people.name, people.role, people.deactivatedAt
		FROM sessions JOIN people ON people.id = sessions.personId WHERE idHash = :idHash`,
		{ idHash }
	);
}

/** A person's sessions that have not expired, last seen first. */
export function listSessions(personId: number, now: string): Promise<SessionRecord[]> {
	return select<SessionRecord>(
		'SELECT * FROM sessions WHERE personId = :personId AND expiresAt > :now ORDER BY lastSeenAt DESC',
		{ personId, now }
	);
}

/** Adds a session, and notes at the person when they signed in last. */
export function insertSession(session: SessionRecord): Promise<void> {
	return write(async (transaction) => {
		await SessionModel.create(session, { transaction });
		await PersonModel.update(
			{ lastSignInAt: session.createdAt },
			{ where: { id: session.personId }, transaction }
		);
	});
}

/** Moves the end of a session. */
export function setExpiry(idHash: string, expiresAt: string): Promise<unknown> {
	return write((transaction) => SessionModel.update({ expiresAt }, { where: { idHash }, transaction }));
}

/** Notes that a session is in use. */
export function setLastSeen(idHash: string, lastSeenAt: string): Promise<unknown> {
	return write((transaction) => SessionModel.update({ lastSeenAt }, { where: { idHash }, transaction }));
}

export function deleteSession(idHash: string): Promise<number> {
	return write((transaction) => SessionModel.destroy({ where: { idHash }, transaction }));
}

/** Ends one session of a person; false where it is not theirs or gone. */
export async function deleteSessionOf(
	personId: number,
	idHash: string,
	transaction: Transaction
): Promise<boolean> {
	return (await SessionModel.destroy({ where: { idHash, personId }, transaction })) === 1;
}

/** Ends the sessions of a person but one (null: none is spared); answers how many there were. */
export function deleteOtherSessions(
	personId: number,
	sparedHash: string | null,
	transaction: Transaction
): Promise<number> {
	const spared = sparedHash === null ? {} : { idHash: { [Op.ne]: sparedHash } };
	return SessionModel.destroy({ where: { personId, ...spared }, transaction });
}

/** Ends every session of a person. */
export async function deleteSessionsOf(personId: number, transaction: Transaction): Promise<void> {
	await SessionModel.destroy({ where: { personId }, transaction });
}

/** Removes what has expired. */
export function deleteExpired(now: string): Promise<void> {
	return write(() => execute('DELETE FROM sessions WHERE expiresAt <= :now', { now }));
}
