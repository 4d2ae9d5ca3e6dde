import { z } from 'zod';
import { ENGINES } from '$lib/domain/reading/reading';
import { RUNBOOK_STATES } from '$lib/domain/runbook/runbook';
import { SYMPTOM_IDS } from '$lib/domain/symptom/symptom';

/** The list's address. Without a state it shows what may be followed: the published ones. */
export const runbookQuery = z.object({
	q: z.string().trim().max(400, 'At most 400 characters.').optional(),
	symptom: z.enum(SYMPTOM_IDS, { error: 'There is no such symptom.' }).optional(),
	engine: z.enum(ENGINES, { error: 'There is no such engine.' }).optional(),
	state: z.enum([...RUNBOOK_STATES, 'any'], { error: 'There is no such state.' }).default('published'),
	cursor: z.string().max(500).optional()
});
