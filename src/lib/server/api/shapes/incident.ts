import { z } from 'zod';
import { OUTCOMES, type Attempt } from '$lib/domain/incident/attempt';
import {
	INCIDENT_STATES,
	ORIGINS,
	type Entry,
	type Evidence,
	type FollowUp,
	type Incident,
	type IncidentSummary
} from '$lib/domain/incident/incident';
import type { Person } from '$lib/domain/person/person';
import { SYMPTOM_IDS } from '$lib/domain/symptom/symptom';
import { comparisonShape, readingShape } from './reading';
import { id, shapeOf, time } from './shape';

const text = z.string().nullable();
const timeOrNull = time.nullable();

/** A person as others see them. */
export const personShape = shapeOf<Person>()('Person', z.object({ id, name: z.string() }));
const personOrNull = personShape.nullable();

/** One dated line of a log. */
export const entryShape = shapeOf<Entry>()(
	'Entry',
	z.object({
		id,
		at: time,
		text: z.string().describe('Markdown.'),
		author: personOrNull.describe('null: the system.'),
		kind: z.enum(['note', 'evidence', 'state', 'attempt', 'alert']),
		revision: id
	})
);

/** A file or a paste with its readings. */
export const evidenceShape = shapeOf<Evidence>()(
	'Evidence',
	z.object({
		id,
		sha256: z
			.string()
			.regex(/^([0-9a-f]{64})?$/)
			.describe(
				'Of the masked bytes; empty while the state is "reading", and once the file is no longer kept.'
			),
		name: z.string(),
		bytes: z.number(),
		kind: z.enum(['plan', 'log', 'picture', 'other']),
		format: z.string(),
		state: z.enum(['reading', 'read', 'failed']),
		addedAt: time,
		addedBy: personOrNull,
		readings: z.array(readingShape)
	})
);

/** A runbook, or a free action, tried in an incident. */
export const attemptShape = shapeOf<Attempt>()(
	'Attempt',
	z.object({
		id,
		runbook: text,
		runbookRevision: z.number().nullable(),
		title: z.string(),
		startedAt: time,
		endedAt: timeOrNull,
		by: personOrNull,
		steps: z.array(
			z.object({
				number: z.number(),
				tickedAt: timeOrNull,
				by: personOrNull,
				skipped: text.describe('The reason; null: not skipped.')
			})
		),
		outcome: z.enum(OUTCOMES).nullable(),
		note: text,
		before: id.nullable().describe('Id of evidence.'),
		after: id.nullable().describe('Id of evidence.'),
		comparison: comparisonShape
			.nullable()
			.describe('null while before or after is missing or holds no plan.'),
		revision: id
	})
);

/** Something left to do after an incident. */
export const followUpShape = shapeOf<FollowUp>()(
	'FollowUp',
	z.object({
		id,
		text: z.string(),
		owner: personOrNull,
		due: text,
		doneAt: timeOrNull,
		revision: id
	})
);

const summary = z.object({
	number: id,
	title: z.string(),
	narrative: z.string().describe('Markdown.'),
	service: text,
	engine: text,
	engineVersion: text,
	database: text,
	severity: z.union([z.literal(1), z.literal(2), z.literal(3), z.literal(4)]),
	state: z.enum(INCIDENT_STATES),
	owner: personOrNull,
	origin: z.enum(ORIGINS),
	startedAt: timeOrNull,
	detectedAt: timeOrNull,
	containedAt: timeOrNull,
	resolvedAt: timeOrNull,
	cause: text,
	resolution: text,
	labels: z.array(z.string()),
	revision: id,
	createdAt: time,
	createdBy: personOrNull,
	updatedAt: time,
	symptoms: z.array(z.enum(SYMPTOM_IDS)),
	recurrence: z.object({ count: z.number(), first: time, last: time }).nullable(),
	mergedInto: id.nullable()
});

/** An incident in a list: everything but evidence, log and attempts. */
export const incidentSummaryShape = shapeOf<IncidentSummary>()('IncidentSummary', summary);

/** The whole incident. */
export const incidentShape = shapeOf<Incident>()(
	'Incident',
	summary.extend({
		evidence: z.array(evidenceShape),
		entries: z.array(entryShape),
		attempts: z.array(attemptShape),
		followUps: z.array(followUpShape)
	})
);
