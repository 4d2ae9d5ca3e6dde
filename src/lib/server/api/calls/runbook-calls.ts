import { z } from 'zod';
import { cautionInput } from '$lib/domain/caution/caution-input';
import { pageQuery } from '$lib/domain/incident/incident-filter';
import { runbookFilter } from '$lib/domain/runbook/runbook-filter';
import {
	compareQuery,
	moveInput,
	reviewInput,
	runbookInput,
	runbookPatch
} from '$lib/domain/runbook/runbook-input';
import type { Call, CallAnswer } from '../call';
import { pageOf } from '../shapes/page';
import {
	cautionShape,
	revisionShape,
	revisionSummaryShape,
	runbookComparisonShape,
	runbookShape,
	runbookSummaryShape
} from '../shapes/runbook';

const group = 'runbooks';
const slug = { slug: z.string().min(1) };
const one = {
	status: 200,
	what: 'The runbook.',
	shape: runbookShape,
	headers: ['etag']
} satisfies CallAnswer;
const newest = { ...one, what: 'The runbook with its newest text.' };

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
		params: slug,
		answer: one
	},
	{
		method: 'post',
		path: '/runbooks',
		id: 'draftRunbook',
		summary: 'Draft a runbook; its slug comes from the title',
		group,
		body: { json: runbookInput, required: true },
		answer: { status: 201, what: 'The draft.', shape: runbookShape, headers: ['location', 'etag'] }
	},
	{
		method: 'patch',
		path: '/runbooks/{slug}',
		id: 'changeRunbook',
		summary: 'Change the newest text: a new revision; what is published stays so until the new text is',
		group,
		params: slug,
		body: { mergePatch: runbookPatch, required: true },
		answer: newest
	},
	{
		method: 'post',
		path: '/runbooks/{slug}/review',
		id: 'reviewRunbook',
		summary: 'Submit the newest text, return it with a note, or approve what somebody else wrote',
		group,
		params: slug,
		body: { json: reviewInput, required: true },
		answer: newest,
		problems: ['refused', 'stale']
	},
	{
		method: 'post',
		path: '/runbooks/{slug}/publish',
		id: 'publishRunbook',
		summary: 'Publish the newest text; refused with every reason',
		group,
		params: slug,
		body: { json: moveInput, required: false },
		answer: newest,
		problems: ['refused', 'stale']
	},
	{
		method: 'post',
		path: '/runbooks/{slug}/retire',
		id: 'retireRunbook',
		summary: 'Take a published runbook out of use',
		group,
		params: slug,
		body: { json: moveInput, required: false },
		answer: newest,
		problems: ['refused', 'stale']
	},
	{
		method: 'get',
		path: '/runbooks/{slug}/revisions',
		id: 'listRevisions',
		summary: 'The revisions of a runbook, the newest first, with what was done with each',
		group,
		params: slug,
		query: pageQuery,
		answer: { status: 200, what: 'A page.', shape: pageOf(revisionSummaryShape), headers: ['link'] }
	},
	{
		method: 'get',
		path: '/runbooks/{slug}/revisions/{n}',
		id: 'readRevision',
		summary: 'One revision with its text',
		group,
		params: slug,
		answer: { status: 200, what: 'The revision.', shape: revisionShape, headers: ['etag'] }
	},
	{
		method: 'get',
		path: '/runbooks/{slug}/compare',
		id: 'compareRevisions',
		summary: 'What is different between two revisions: cautions first, then the text by word',
		group,
		params: slug,
		query: compareQuery,
		answer: { status: 200, what: 'The comparison.', shape: runbookComparisonShape }
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
