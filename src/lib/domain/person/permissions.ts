import type { Role } from './person';

/**
 * The one table of who may do what. A role holds everything of the roles before it (ROLES).
 * `own`: additionally allowed from this role on where the thing is the actor's own.
 */
interface Rule {
	from: Role;
	own?: Role;
}

export const PERMISSIONS = {
	'incident.read': { from: 'reader' },
	'incident.write': { from: 'responder' },
	'entry.read': { from: 'reader' },
	'entry.write': { from: 'responder' },
	/** Correcting an entry: its author, or a curator. */
	'entry.edit': { from: 'curator', own: 'responder' },
	'evidence.read': { from: 'reader' },
	'evidence.write': { from: 'responder' },
	'evidence.remove': { from: 'curator' },
	'attempt.read': { from: 'reader' },
	'attempt.write': { from: 'responder' },
	/** Reads evidence and stores nothing: Gauge, /readings, /precedents, /sizing, /cautions. */
	'reading.make': { from: 'reader' },
	'precedent.read': { from: 'reader' },
	'precedent.judge': { from: 'responder' },
	'incident.review': { from: 'curator' },
	'incident.merge': { from: 'curator' },
	'runbook.read': { from: 'reader' },
	'runbook.draft': { from: 'responder' },
	'runbook.edit': { from: 'curator', own: 'responder' },
	'runbook.publish': { from: 'curator' },
	'symptom.read': { from: 'reader' },
	'symptom.edit': { from: 'curator' },
	'search.read': { from: 'reader' },
	'watch.read': { from: 'reader' },
	/** One's own password, sign-ins and tokens. */
	'account.own': { from: 'reader' },
	'people.manage': { from: 'administrator' },
	'settings.manage': { from: 'administrator' },
	'audit.read': { from: 'administrator' },
	/** The outbox: what was mailed to whom, with the links where no mail server is set. */
	'mail.read': { from: 'administrator' }
} as const satisfies Record<string, Rule>;

export type Permission = keyof typeof PERMISSIONS;
