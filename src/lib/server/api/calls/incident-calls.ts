import { z } from 'zod';
import { incidentFilter, pageQuery } from '$lib/domain/incident/incident-filter';
import {
	attemptInput,
	attemptPatch,
	entryInput,
	entryPatch,
	incidentInput,
	incidentPatch
} from '$lib/domain/incident/incident-input';
import type { Call } from '../call';
import {
	attemptShape,
	entryShape,
	evidenceShape,
	incidentShape,
	incidentSummaryShape
} from '../shapes/incident';
import { pageOf } from '../shapes/page';
import { evidencePart } from './evidence-part';

const group = 'incidents';
const log = 'log';
const attempts = 'attempts';

/** Incidents, their log, their evidence and their attempts. */
export const INCIDENT_CALLS: readonly Call[] = [
	{
		method: 'get',
		path: '/incidents',
		id: 'listIncidents',
		summary: 'Incidents under a filter, page by page',
		group,
		query: incidentFilter,
		answer: { status: 200, what: 'A page.', shape: pageOf(incidentSummaryShape), headers: ['link'] }
	},
	{
		method: 'post',
		path: '/incidents',
		id: 'logIncident',
		summary: 'Log an incident, with its evidence where there is some',
		group,
		body: {
			json: incidentInput,
			multipart: [
				{
					name: 'incident',
					kind: 'text',
					what: 'The incident as JSON.',
					json: incidentInput,
					required: true
				},
				{ ...evidencePart, required: false }
			],
			required: true
		},
		answer: { status: 201, what: 'The incident.', shape: incidentShape, headers: ['location', 'etag'] }
	},
	{
		method: 'get',
		path: '/incidents/{number}',
		id: 'readIncident',
		summary: 'An incident with evidence, readings, log and attempts',
		group,
		answer: { status: 200, what: 'The incident.', shape: incidentShape, headers: ['etag'] }
	},
	{
		method: 'patch',
		path: '/incidents/{number}',
		id: 'changeIncident',
		summary: 'Edit an incident, move it, take it or hand it over',
		group,
		body: { mergePatch: incidentPatch, required: true },
		answer: { status: 200, what: 'The incident.', shape: incidentShape, headers: ['etag'] },
		problems: ['refused']
	},
	{
		method: 'post',
		path: '/incidents/{number}/evidence',
		id: 'attachEvidence',
		summary: 'Attach evidence to an incident',
		group: 'evidence',
		body: { multipart: [evidencePart], required: true },
		answer: {
			status: 201,
			what: 'The evidence with its readings; what takes long is still "reading".',
			shape: z.object({ items: z.array(evidenceShape) }),
			headers: ['location']
		}
	},
	{
		method: 'delete',
		path: '/incidents/{number}/evidence/{id}',
		id: 'removeEvidence',
		summary: 'Remove a piece of evidence and its readings',
		group: 'evidence',
		answer: { status: 204, what: 'It is gone; log and audit say so.' }
	},
	{
		method: 'get',
		path: '/incidents/{number}/entries',
		id: 'listEntries',
		summary: 'The log of an incident, earliest first',
		group: log,
		query: pageQuery,
		answer: { status: 200, what: 'A page.', shape: pageOf(entryShape), headers: ['link'] }
	},
	{
		method: 'post',
		path: '/incidents/{number}/entries',
		id: 'addEntry',
		summary: 'Add a note to the log',
		group: log,
		body: { json: entryInput, required: true },
		answer: { status: 201, what: 'The entry.', shape: entryShape, headers: ['location', 'etag'] }
	},
	{
		method: 'get',
		path: '/incidents/{number}/entries/{id}',
		id: 'readEntry',
		summary: 'One entry of the log',
		group: log,
		answer: { status: 200, what: 'The entry.', shape: entryShape, headers: ['etag'] }
	},
	{
		method: 'patch',
		path: '/incidents/{number}/entries/{id}',
		id: 'changeEntry',
		summary: 'Correct an entry: its author, or a curator',
		group: log,
		body: { mergePatch: entryPatch, required: true },
		answer: { status: 200, what: 'The entry.', shape: entryShape, headers: ['etag'] }
	},
	{
		method: 'get',
		path: '/incidents/{number}/attempts',
		id: 'listAttempts',
		summary: 'The attempts of an incident, earliest first',
		group: attempts,
		query: pageQuery,
		answer: { status: 200, what: 'A page.', shape: pageOf(attemptShape), headers: ['link'] }
	},
	{
		method: 'post',
		path: '/incidents/{number}/attempts',
		id: 'startAttempt',
		summary: 'Start an attempt: of a published runbook, or of a free action',
		group: attempts,
		body: { json: attemptInput, required: true },
		answer: { status: 201, what: 'The attempt.', shape: attemptShape, headers: ['location', 'etag'] }
	},
	{
		method: 'get',
		path: '/incidents/{number}/attempts/{id}',
		id: 'readAttempt',
		summary: 'One attempt',
		group: attempts,
		answer: { status: 200, what: 'The attempt.', shape: attemptShape, headers: ['etag'] }
	},
	{
		method: 'patch',
		path: '/incidents/{number}/attempts/{id}',
		id: 'changeAttempt',
		summary: 'Tick steps, record the outcome, name the evidence before and after',
		group: attempts,
		body: { mergePatch: attemptPatch, required: true },
		answer: { status: 200, what: 'The attempt.', shape: attemptShape, headers: ['etag'] }
	}
];
