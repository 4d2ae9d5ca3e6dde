import { z } from 'zod';
import type { Call } from '../call';
import { watchShape } from '../shapes/watch';

/** What programs ask of the server itself. */
export const SERVICE_CALLS: readonly Call[] = [
	{
		method: 'get',
		path: '/health',
		id: 'readHealth',
		summary: 'Whether the server and its database answer',
		group: 'service',
		isOpen: true,
		answer: {
			status: 200,
			what: 'Both do.',
			shape: z.object({
				status: z.literal('ok'),
				version: z.string(),
				schema: z.string().nullable().describe('The newest migration.'),
				index: z.object({ documents: z.int(), behind: z.int() })
			})
		}
	},
	{
		method: 'get',
		path: '/watch',
		id: 'readWatch',
		summary: 'What needs a person now',
		group: 'watch',
		answer: { status: 200, what: 'The figures behind the Watch.', shape: watchShape }
	},
	{
		method: 'get',
		path: '/openapi.json',
		id: 'describeApi',
		summary: 'This document',
		group: 'service',
		isOpen: true,
		answer: { status: 200, what: 'OpenAPI 3.1.', shape: z.looseObject({ openapi: z.string() }) }
	}
];
