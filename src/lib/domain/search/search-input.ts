import { z } from 'zod';
import { HIT_KINDS } from './search-hit';

/** The search line, what kind of thing is wanted (all unless told), and how many. */
export const searchInput = z.object({
	q: z.string().max(500, 'At most 500 characters.').default(''),
	kind: z.enum(HIT_KINDS).optional(),
	limit: z.int('A whole number.').min(1, 'At least 1.').max(200, 'At most 200.').optional()
});
export type SearchInput = z.infer<typeof searchInput>;
