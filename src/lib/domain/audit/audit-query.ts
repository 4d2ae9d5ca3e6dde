import { z } from 'zod';
import { pageQuery, periodEnd, periodStart } from '../incident/incident-filter';

const PERSON = "Give a person's id, or system.";

/** What the audit trail is asked for. */
export const auditFilter = z.object({
	/** A person's id, or `system`. */
	person: z
		.string({ error: PERSON })
		.regex(/^(system|[1-9]\d{0,14})$/, PERSON)
		.transform((text) => (text === 'system' ? text : Number(text)))
		.optional(),
	/** `incident.update`, or `incident` for all that is done to incidents. */
	action: z
		.string()
		.trim()
		.regex(
			/^[a-z][a-z-]*(\.[a-z-]+)?$/,
			'Give an action such as incident.update, or incident for all of them.'
		)
		.max(60, 'At most 60 characters.')
		.optional(),
	/** `incident:412`, or `incident` for all of them. */
	subject: z
		.string()
		.trim()
		.regex(/^[a-z][a-zA-Z-]*(:[\w.-]+)?$/, 'Give a thing such as incident:412, or incident for all of them.')
		.max(200, 'At most 200 characters.')
		.optional(),
	from: periodStart.optional(),
	to: periodEnd.optional()
});
export type AuditFilter = z.infer<typeof auditFilter>;

/** Query of the audit trail: what the URL of the page and of the call may hold. */
export const auditQuery = pageQuery.extend(auditFilter.shape);
export type AuditQuery = z.infer<typeof auditQuery>;
