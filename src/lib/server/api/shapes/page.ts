import { z } from 'zod';

/** A page of a list of these. */
export function pageOf<S extends z.ZodType>(item: S) {
	return z.object({
		items: z.array(item),
		next: z.string().nullable().describe('To be handed back as cursor; null: the last page.'),
		total: z.int().nullable().describe('Of the whole list under the same filter.')
	});
}
