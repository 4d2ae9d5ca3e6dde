import { z } from 'zod';
import type { Call } from '../call';
import { evidenceShape } from '../shapes/incident';
import { comparisonShape, readingShape } from '../shapes/reading';
import { evidencePart } from './evidence-part';

/** Evidence that is read, kept and fetched outside an incident. */
export const EVIDENCE_CALLS: readonly Call[] = [
	{
		method: 'post',
		path: '/readings',
		id: 'readEvidence',
		summary: 'Read evidence and store nothing',
		group: 'readings',
		body: {
			raw: ['text/plain', 'application/json', 'application/xml', 'application/octet-stream'],
			multipart: [evidencePart],
			required: false
		},
		answer: {
			status: 200,
			what: 'One reading a plan or log; of what is unknown or empty, one that says so in a warning.',
			shape: z.object({ readings: z.array(readingShape) })
		}
	},
	{
		method: 'post',
		path: '/readings/compare',
		id: 'compareReadings',
		summary: 'Compare two plans or two logs and store nothing',
		group: 'readings',
		body: {
			multipart: [
				{ name: 'before', kind: 'file', what: 'The plan or log before; one file.', required: true },
				{ name: 'after', kind: 'file', what: 'The plan or log after; one file.', required: true }
			],
			required: true
		},
		answer: {
			status: 200,
			what: 'What changed; of files with several plans, those of one statement are compared.',
			shape: comparisonShape
		}
	},
	{
		method: 'post',
		path: '/evidence',
		id: 'keepEvidence',
		summary: 'Keep evidence, for an incident or alone until one claims it',
		group: 'evidence',
		body: {
			multipart: [evidencePart, { name: 'incident', kind: 'text', what: 'Number of the incident.' }],
			required: true
		},
		answer: {
			status: 201,
			what: 'The evidence with its readings; what takes long is still "reading".',
			shape: z.object({ items: z.array(evidenceShape) }),
			headers: ['location']
		},
		problems: ['not_found']
	},
	{
		method: 'get',
		path: '/evidence/{sha256}',
		id: 'fetchEvidence',
		summary: 'The masked file, to be saved',
		group: 'evidence',
		params: { sha256: z.string().regex(/^[0-9a-f]{64}$/) },
		answer: { status: 200, what: 'The file.', file: true }
	}
];
