import { z } from 'zod';
import { draftInput, precedentQuery } from '$lib/domain/precedent/precedent-input';
import { searchInput } from '$lib/domain/search/search-input';
import { sizingInput } from '$lib/domain/sizing/sizing';
import type { Call } from '../call';
import { precedentShape, searchHitShape, sizingShape } from '../shapes/finding';
import { evidencePart } from './evidence-part';

/** What is worked out and found. */
export const FINDING_CALLS: readonly Call[] = [
	{
		method: 'post',
		path: '/precedents',
		id: 'findPrecedents',
		summary: 'Incidents that resemble something not logged',
		group: 'precedents',
		query: precedentQuery,
		body: {
			json: draftInput,
			multipart: [
				{ ...evidencePart, required: false },
				{ name: 'title', kind: 'text', what: 'A title, as far as there is one.' },
				{ name: 'text', kind: 'text', what: 'What happened, in words.' },
				{ name: 'service', kind: 'text', what: 'The service.' },
				{ name: 'engine', kind: 'text', what: 'The engine; read out of the evidence where left out.' }
			],
			required: true
		},
		answer: {
			status: 200,
			what: 'The most similar first; nothing is stored.',
			shape: z.object({ items: z.array(precedentShape) })
		}
	},
	{
		method: 'get',
		path: '/incidents/{number}/precedents',
		id: 'listPrecedents',
		summary: 'Incidents that resemble this one',
		group: 'precedents',
		query: precedentQuery,
		answer: {
			status: 200,
			what: 'The most similar first.',
			shape: z.object({ items: z.array(precedentShape) })
		},
		problems: ['not_found']
	},
	{
		method: 'get',
		path: '/search',
		id: 'search',
		summary: 'Find incidents, runbooks, symptoms and entries',
		group: 'search',
		query: searchInput,
		answer: {
			status: 200,
			what: 'One list, best first.',
			shape: z.object({ items: z.array(searchHitShape) })
		}
	},
	{
		method: 'post',
		path: '/sizing',
		id: 'computeSizing',
		summary: 'The memory that an operator needs, and what happens at the settings around the present one',
		group: 'sizing',
		body: { json: sizingInput, required: true },
		answer: { status: 200, what: 'The sizing.', shape: sizingShape }
	}
];
