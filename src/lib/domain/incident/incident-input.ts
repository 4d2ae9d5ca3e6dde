import { z } from 'zod';
import { ENGINES } from '../reading/reading';
import { OUTCOMES } from './attempt';
import { INCIDENT_STATES } from './incident';

/** RFC 3339 with an offset; normalised to UTC. */
export const timestamp = z.iso
	.datetime({ offset: true, error: 'Give a date and time with offset, such as 2026-12-01T04:03:00+01:00.' })
	.transform((text) => new Date(text).toISOString());

const optionalText = (most: number) =>
	z.string().trim().max(most, `At most ${most} characters.`).nullable().optional();

export const incidentInput = z.object({
	title: z
		.string({ error: 'Say in one line what is wrong.' })
		.trim()
		.min(1, 'Say in one line what is wrong.')
		.max(300, 'At most 300 characters: the rest belongs into the narrative.'),
	narrative: z.string().max(200_000, 'At most 200,000 characters.').nullable().optional(),
	service: optionalText(200),
	engine: z.enum(ENGINES).nullable().optional(),
	engineVersion: optionalText(60),
	database: optionalText(200),
	severity: z.number().int().min(1).max(4).nullable().optional(),
	state: z.enum(INCIDENT_STATES).nullable().optional(),
	owner: z.number().int().positive().nullable().optional(),
	startedAt: timestamp.nullable().optional(),
	detectedAt: timestamp.nullable().optional(),
	containedAt: timestamp.nullable().optional(),
	resolvedAt: timestamp.nullable().optional(),
	cause: optionalText(300),
	resolution: z.string().max(50_000, 'At most 50,000 characters.').nullable().optional(),
	labels: z.array(z.string().trim().min(1).max(60)).max(30).nullable().optional()
});
export type IncidentInput = z.infer<typeof incidentInput>;

/** A merge patch (RFC 7396): what is left out stays, null clears. `reason` says why it came back to open. */
export const incidentPatch = incidentInput
	.partial()
	.extend({ reason: z.string().trim().max(2000).optional() });
export type IncidentPatch = z.infer<typeof incidentPatch>;

export const entryInput = z.object({
	text: z.string().trim().min(1, 'Write what you saw, tried or decided.').max(100_000),
	at: timestamp.optional()
});
export type EntryInput = z.infer<typeof entryInput>;
export const entryPatch = entryInput.partial();
export type EntryPatch = z.infer<typeof entryPatch>;

export const attemptInput = z.object({
	runbook: z.string().min(1).nullable().optional(),
	title: z.string().trim().min(1).max(300).optional(),
	startedAt: timestamp.optional(),
	note: z.string().max(20_000).nullable().optional(),
	before: z.number().int().positive().nullable().optional()
});
export type AttemptInput = z.infer<typeof attemptInput>;

const stepPatch = z.object({
	number: z.number().int().positive(),
	ticked: z.boolean().optional(),
	tickedAt: timestamp.nullable().optional(),
	skipped: z.string().trim().min(1).max(2000).nullable().optional()
});
export const attemptPatch = z.object({
	title: z.string().trim().min(1).max(300).optional(),
	/** Only the steps named change. */
	steps: z.array(stepPatch).max(200).optional(),
	outcome: z.enum(OUTCOMES).nullable().optional(),
	endedAt: timestamp.nullable().optional(),
	note: z.string().max(20_000).nullable().optional(),
	before: z.number().int().positive().nullable().optional(),
	after: z.number().int().positive().nullable().optional()
});
export type AttemptPatch = z.infer<typeof attemptPatch>;
