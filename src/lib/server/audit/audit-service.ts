import type { Actor } from '$lib/domain/person/person';
import type { Transaction } from '../db/transaction';
import { insertAudit } from './audit-store';

/**
 * Notes who did what, in the transaction that does it: an action without its line doesn't happen. `action`
 * is `incident.create`, `subject` is `incident:412`. Never a secret in `detail`.
 */
export function record(
	actor: Actor,
	action: string,
	subject: string,
	detail: Record<string, unknown>,
	transaction: Transaction
): Promise<void> {
	return insertAudit(
		{
			at: new Date().toISOString(),
			actorId: actor.personId,
			actorName: actor.name,
			via: actor.via,
			action,
			subject,
			detail
		},
		transaction
	);
}
