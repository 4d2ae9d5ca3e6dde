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

/** A parameter that may be given several times; always read as a list. */
function repeatable<T extends z.ZodType>(item: T) {
	return z.preprocess(
		(value) => (value === undefined || value === '' ? [] : Array.isArray(value) ? value : [value]),
		z.array(item).max(50, 'At most 50 values.')
	);
}

/** A parameter of a form that is sent even when it is left empty. */
function optional<T extends z.ZodType>(inner: T) {
	return z.preprocess((value) => (value === '' ? undefined : value), inner.optional());
}

const dayOrTime = z.union([z.iso.date(), z.iso.datetime({ offset: true })], {
	error: 'Give a day such as 2026-12-01, or a date and time with offset.'
});

/** The start of a day, or the instant itself; UTC. */
const periodStart = dayOrTime.transform((text) => new Date(text).toISOString());

/** The last millisecond of a day, or the instant itself; UTC. */
const periodEnd = dayOrTime.transform((text) =>
	text.includes('T') ? new Date(text).toISOString() : `${text}T23:59:59.999Z`
);

export const listLimit = z.coerce
	.number({ error: 'Give a whole number from 1 to 200.' })
	.int('Give a whole number from 1 to 200.')
	.min(1, 'At least 1.')
	.max(200, 'At most 200.')
	.default(50);

/** Query of a list that knows nothing but pages. */
export const pageQuery = z.object({ limit: listLimit, cursor: optional(z.string().max(500)) });
export type PageQuery = z.infer<typeof pageQuery>;

/** Query of the list of incidents: what the URL of the page and of the call may hold. */
export const incidentFilter = pageQuery.extend({
	state: repeatable(z.enum(INCIDENT_STATES)),
	severity: repeatable(z.coerce.number().int().min(1).max(4)),
	service: repeatable(z.string().trim().min(1).max(200)),
	engine: repeatable(z.enum(ENGINES)),
	symptom: repeatable(z.enum(SYMPTOM_IDS)),
	/** A person's id, `me`, or `none` for those that nobody is on. */
	owner: optional(
		z.union([z.enum(['me', 'none']), z.coerce.number().int().positive()], {
			error: "Give a person's id, me or none."
		})
	),
	/** Began (or, where that isn't known, was noticed) at or after. */
	from: optional(periodStart),
	/** Began at or before; a day counts to its end. */
	to: optional(periodEnd),
	q: optional(z.string().trim().max(400, 'At most 400 characters.')),
	sort: z.preprocess(
		(value) => (value === '' ? undefined : value),
		z.enum(INCIDENT_SORTS).default('-startedAt')
	)
});
export type IncidentFilter = z.infer<typeof incidentFilter>;
