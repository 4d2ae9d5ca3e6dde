import { z } from 'zod';
import { INCIDENT_STATES } from '$lib/domain/incident/incident';
import { REASON_KINDS, type Precedent } from '$lib/domain/precedent/precedent';
import { HIT_KINDS, type SearchHit } from '$lib/domain/search/search-hit';
import type { Sizing } from '$lib/domain/sizing/sizing';
import { id, shapeOf, time } from './shape';

const text = z.string().nullable();

/** Another incident that resembles the one asked about. */
export const precedentShape = shapeOf<Precedent>()(
	'Precedent',
	z.object({
		number: id,
		title: z.string(),
		score: z.number().describe('0 to 1.'),
		state: z.enum(INCIDENT_STATES),
		startedAt: time.nullable(),
		resolvedAt: time.nullable(),
		resolution: text.describe('First 300 characters.'),
		cause: text,
		later: z.boolean().describe('It began after the one asked about.'),
		reasons: z.array(
			z.object({
				kind: z.enum(REASON_KINDS),
				text: z.string(),
				share: z.number().describe('The shares of one precedent add up to 1.')
			})
		),
		verdict: z.enum(['same', 'related', 'not']).nullable()
	})
);

/** One line of a search's answer. */
export const searchHitShape = shapeOf<SearchHit>()(
	'SearchHit',
	z.object({
		kind: z.enum(HIT_KINDS),
		id: z.string(),
		title: z.string(),
		url: z.string(),
		snippet: z.array(z.object({ text: z.string(), mark: z.boolean() })),
		score: z.number()
	})
);

const figure = z.number().nullable();

/** The memory that an operator needs, and what happens at the settings around the present one. */
export const sizingShape = shapeOf<Sizing>()(
	'Sizing',
	z.object({
		neededKb: z.number(),
		setting: z.object({ name: z.string(), valueKb: z.number() }),
		batches: figure,
		passes: figure,
		temporaryBytes: z.number(),
		exposureKb: z.number(),
		table: z.array(
			z.object({
				settingKb: z.number(),
				batches: figure,
				passes: figure,
				temporaryBytes: z.number(),
				exposureKb: z.number()
			})
		),
		formula: z.string(),
		source: z.string()
	})
);
