import { z } from 'zod';

/** Every error (RFC 9457), with the code of this application. */
export const problemShape = z.object({
	type: z.string(),
	title: z.string(),
	status: z.int(),
	detail: z.string(),
	code: z.string(),
	errors: z.array(z.object({ field: z.string(), message: z.string() })).optional(),
	reasons: z.array(z.string()).optional(),
	current: z.unknown().optional().describe('The thing as it stands now (stale).'),
	id: z.string().optional().describe('Under which the log holds the detail.')
});
