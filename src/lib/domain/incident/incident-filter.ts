import { z } from 'zod';
import { ENGINES } from '../reading/reading';
import { SYMPTOM_IDS } from '../symptom/symptom';
import { INCIDENT_STATES } from './incident';

/** Descending where it begins with a minus. "startedAt" falls back to detectedAt, then createdAt. */
export const INCIDENT_SORTS = [
	'-startedAt',
	'startedAt',
	'severity',
	'-severity',
	'-updatedAt',
	'updatedAt',
	'number',
	'-number'
] as const;
export type IncidentSort = (typeof INCIDENT_SORTS)[number];

/** A parameter that may be given several times: any of the values will do. */
function repeatable<T extends z.ZodType>(item: T) {
	return z.array(item).max(50, 'At most 50 values.').default([]);
}

/** Text to be looked up. The database ends a text at a null character. */
function searchText(most: number) {
	return z
		.string()
		.trim()
		.max(most, `At most ${most} characters.`)
		.refine((text) => !text.includes('\0'), 'No null characters.');
}

const dayOrTime = z.union([z.iso.date(), z.iso.datetime({ offset: true })], {
	error: 'Give a day such as 2026-12-01, or a date and time with offset.'
});

/** The start of a day, or the instant itself; UTC. */
export const periodStart = dayOrTime.transform((text) => new Date(text).toISOString());

/** The last millisecond of a day, or the instant itself; UTC. */
export const periodEnd = dayOrTime.transform((text) =>
	text.includes('T') ? new Date(text).toISOString() : `${text}T23:59:59.999Z`
);

const owner = z
	.string()
	.regex(/^(me|none|[1-9]\d{0,14})$/, "Give a person's id, me or none.")
	.transform((text) => (text === 'me' || text === 'none' ? text : Number(text)));

const pageSize = 'Give a whole number from 1 to 200.';

/** Query of a list that knows nothing but pages. */
export const pageQuery = z.object({
	limit: z.number(pageSize).int(pageSize).min(1, pageSize).max(200, pageSize).default(50),
	cursor: z.string().max(500).optional()
});
export type PageQuery = z.infer<typeof pageQuery>;

/** Query of the list of incidents: what the URL of the page and of the call may hold. */
export const incidentFilter = pageQuery.extend({
	state: repeatable(z.enum(INCIDENT_STATES)),
	severity: repeatable(z.number().int().min(1).max(4)),
	service: repeatable(searchText(200).min(1)),
	engine: repeatable(z.enum(ENGINES)),
	symptom: repeatable(z.enum(SYMPTOM_IDS)),
	/** A person's id, `me`, or `none` for those that nobody is on. */
	owner: owner.optional(),
	/** Began (or, where that isn't known, was noticed) at or after. */
	from: periodStart.optional(),
	/** Began at or before; a day counts to its end. */
	to: periodEnd.optional(),
	q: searchText(400).optional(),
	sort: z.enum(INCIDENT_SORTS).default('-startedAt')
});
export type IncidentFilter = z.infer<typeof incidentFilter>;
