import { execute } from '../db/query';
import type { Transaction } from '../db/transaction';

/**
 * The services date what they write by the clock of today; these put the times of the story in its place.
 * Nothing but the demonstration may do that.
 */

/** When the incident was logged and last touched. */
export async function moveIncident(
	number: number,
	times: { createdAt: string; updatedAt: string },
	_transaction: Transaction
): Promise<void> {
	await execute(
		'UPDATE incidents SET createdAt = :createdAt, updatedAt = :updatedAt WHERE number = :number',
		{
			number,
			...times
		}
	);
}

/** When a file was attached, in its row and in the log. */
export async function moveEvidence(
	id: number,
	name: string,
	at: string,
	_transaction: Transaction
): Promise<void> {
	await execute('UPDATE evidence SET addedAt = :at WHERE id = :id', { id, at });
	await execute(
		`UPDATE entries SET at = :at WHERE kind = 'evidence' AND instr(text, :name) > 0
		AND incidentNumber = (SELECT incidentNumber FROM evidence WHERE id = :id)`,
		{ id, at, name: `\`${name}\`` }
	);
}

/** When the incident moved to a state, in the log. */
export async function moveStateEntry(
	number: number,
	begins: string,
	at: string,
	_transaction: Transaction
): Promise<void> {
	await execute(
		"UPDATE entries SET at = :at WHERE incidentNumber = :number AND kind = 'state' AND text LIKE :begins",
		{ number, at, begins: `${begins}%` }
	);
}

/** Entries count as written when they say that things happened. */
export async function settleEntries(number: number, _transaction: Transaction): Promise<void> {
	await execute('UPDATE entries SET createdAt = at, updatedAt = at WHERE incidentNumber = :number', {
		number
	});
}
