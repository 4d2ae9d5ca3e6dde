import type { Role } from '$lib/domain/person/person';

/** What a role may do, in a sentence that stands behind its name; each includes the one before. */
export const ROLE_WORDS: Record<Role, string> = {
	reader: 'browses and searches everything and reads plans with the Gauge.',
	responder: 'logs incidents, attaches evidence, records attempts and drafts runbooks.',
	curator: 'reviews and publishes runbooks, confirms causes and removes evidence.',
	administrator: 'manages people and settings and reads the audit trail.'
};
