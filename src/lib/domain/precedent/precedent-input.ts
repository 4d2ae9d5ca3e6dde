import { z } from 'zod';
import { timestamp } from '../incident/incident-input';
import { ENGINES } from '../reading/reading';

const words = (most: number) => z.string().max(most, `At most ${most} characters.`).nullable().optional();

/** Something that is not logged yet, to find precedents for; its evidence travels beside it. */
export const draftInput = z.object({
	title: words(300),
	/** What was written so far: the narrative. */
	text: words(200_000),
	service: words(200),
	engine: z.enum(ENGINES).nullable().optional(),
	database: words(200),
	startedAt: timestamp.nullable().optional()
});
export type DraftInput = z.infer<typeof draftInput>;

export const precedentQuery = z.object({
	limit: z.int('A whole number.').min(1, 'At least 1.').max(50, 'At most 50.').optional()
});
