import { z } from 'zod';
import { pageQuery } from '../incident/incident-filter';
import { ENGINES } from '../reading/reading';
import { SYMPTOM_IDS } from '../symptom/symptom';
import { RUNBOOK_STATES } from './runbook';

/** Query of the list of runbooks: what its call may hold. */
export const runbookFilter = pageQuery.extend({
	state: z.enum(RUNBOOK_STATES, { error: 'There is no such state.' }).optional(),
	engine: z.enum(ENGINES, { error: 'There is no such engine.' }).optional(),
	symptom: z.enum(SYMPTOM_IDS, { error: 'There is no such symptom.' }).optional(),
	/** Every word has to stand in title, summary or text. */
	q: z
		.string()
		.trim()
		.max(400, 'At most 400 characters.')
		.refine((text) => !text.includes('\0'), 'No null characters.')
		.optional()
});
export type RunbookFilter = z.infer<typeof runbookFilter>;
