import { z } from 'zod';
import { INCIDENT_STATES } from '$lib/domain/incident/incident';
import type { Watch } from '$lib/domain/watch/watch';
import { personShape } from './incident';
import { id, shapeOf, time } from './shape';

const text = z.string().nullable();
const person = personShape.nullable();

const overflow = z.object({
	where: text,
	temporaryBytes: z.number().nullable(),
	files: z.number().nullable()
});

const next = z.discriminatedUnion('kind', [
	z.object({ kind: z.literal('take') }),
	z.object({
		kind: z.literal('follow'),
		attempt: id,
		runbook: text,
		title: z.string(),
		step: z.number(),
		of: z.number()
	}),
	z.object({ kind: z.literal('record'), attempt: id, runbook: text, title: z.string() }),
	z.object({ kind: z.literal('runbook'), count: z.number() }),
	z.object({ kind: z.literal('evidence') }),
	z.object({ kind: z.literal('write') })
]);

const watched = z.object({
	number: id,
	title: z.string(),
	service: text,
	engine: text,
	engineVersion: text,
	severity: z.union([z.literal(1), z.literal(2), z.literal(3), z.literal(4)]),
	state: z.enum(INCIDENT_STATES),
	revision: id,
	owner: person,
	since: time,
	containedAt: time.nullable(),
	overflow: overflow.nullable(),
	next
});

/** What needs a person now. */
export const watchShape = shapeOf<Watch>()(
	'Watch',
	z.object({
		at: time,
		open: z.array(watched),
		openTotal: z.number(),
		contained: z.array(watched),
		containedTotal: z.number(),
		attempts: z.array(
			z.object({
				id,
				incident: id,
				incidentTitle: z.string(),
				runbook: text,
				title: z.string(),
				by: person,
				startedAt: time,
				step: z.number().nullable(),
				of: z.number()
			})
		),
		reviews: z.array(z.object({ slug: z.string(), title: z.string(), reviewDue: z.string(), owner: person })),
		weeks: z.array(z.object({ from: z.iso.date(), temporaryBytes: z.number().nullable(), logs: z.number() })),
		worked: z.array(
			z.object({
				attempt: id,
				incident: id,
				incidentTitle: z.string(),
				runbook: text,
				title: z.string(),
				endedAt: time
			})
		),
		incidents: z.number()
	})
);
