import { z } from 'zod';
import { ENGINES } from '../reading/reading';

/** Body of POST /cautions. */
export const cautionInput = z.object({
	engine: z.enum(ENGINES, { error: `Name the engine: ${ENGINES.join(', ')}.` }),
	engineVersion: z.string().trim().max(60, 'At most 60 characters.').nullable().optional(),
	sql: z.string({ error: 'Give the statements as text.' }).max(200_000, 'At most 200,000 characters.')
});
export type CautionInput = z.infer<typeof cautionInput>;
