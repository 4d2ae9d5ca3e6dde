import { z } from 'zod';
import { OUTCOMES } from '$lib/domain/incident/attempt';

const whole = z.number().int().positive();

/** The address: which attempt in which incident, which step is looked at, which boxes a browser without JavaScript ticked. */
export const followQuery = z.object({
	incident: whole,
	attempt: whole,
	step: whole.optional(),
	/** Asks for the outcome before every step is done. */
	conclude: z.boolean().optional(),
	check: z.array(z.number().int().min(0)).max(50).optional()
});

/** Every form names the revision that it was drawn from. */
const edit = z.object({ revision: whole });

export const tickForm = edit.extend({
	step: whole,
	check: z.array(z.number().int().min(0)).max(50).optional()
});

export const skipForm = edit.extend({
	step: whole,
	reason: z
		.string({ error: 'Say in a few words why the step is skipped.' })
		.trim()
		.min(1, 'Say in a few words why the step is skipped.')
		.max(2000, 'At most 2,000 characters.')
});

export const takeBackForm = edit.extend({ step: whole });

export const concludeForm = edit.extend({
	outcome: z.enum(OUTCOMES, { error: 'Say what came of it.' }),
	note: z.string().trim().max(20_000, 'At most 20,000 characters.').nullable().optional(),
	after: whole.nullable().optional()
});

export const handOverForm = z.object({
	incidentRevision: whole,
	/** Left empty: whoever takes it. */
	to: whole.nullable().optional(),
	note: z
		.string({ error: 'Say where you stopped and what comes next.' })
		.trim()
		.min(1, 'Say where you stopped and what comes next.')
		.max(20_000, 'At most 20,000 characters.')
});
