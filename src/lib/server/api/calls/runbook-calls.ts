import { z } from 'zod';
import { cautionInput } from '$lib/domain/caution/caution-input';
import { runbookFilter } from '$lib/domain/runbook/runbook-filter';
import type { Call } from '../call';
import { pageOf } from '../shapes/page';
import { cautionShape, runbookShape, runbookSummaryShape } from '../shapes/runbook';

const group = 'runbooks';

/** Runbooks, and what statements do to production. */
export const RUNBOOK_CALLS: readonly Call[] = [
	{
		method: 'get',
		path: '/runbooks',
		id: 'listRunbooks',
		summary: 'Runbooks under a filter, by title, page by page',
		group,
		query: runbookFilter,
		answer: { status: 200, what: 'A page.', shape: pageOf(runbookSummaryShape), headers: ['link'] }
	},
	{
		method: 'get',
		path: '/runbooks/{slug}',
		id: 'readRunbook',
		summary: 'A runbook with its steps and the caution of every statement',
		group,
		params: { slug: z.string().min(1) },
		answer: { status: 200, what: 'The runbook.', shape: runbookShape, headers: ['etag'] }
	},
	{
		method: 'post',
		path: '/cautions',
		id: 'readCautions',
		summary: 'What statements do to production; nothing is run',
		group: 'cautions',
		body: { json: cautionInput, required: true },
		answer: {
			status: 200,
			what: 'One a statement, in order.',
			shape: z.object({ items: z.array(cautionShape) })
		}
	}
];
