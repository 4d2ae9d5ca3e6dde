import { SYMPTOM_IDS } from '$lib/domain/symptom/symptom';
import { z } from 'zod';
import type { Call } from '../call';
import { pageOf } from '../shapes/page';
import { symptomPageShape, symptomSummaryShape } from '../shapes/symptom';

const group = 'symptoms';

/** The catalogue of symptoms, with what the team has met and what helped. */
export const SYMPTOM_CALLS: readonly Call[] = [
	{
		method: 'get',
		path: '/symptoms',
		id: 'listSymptoms',
		summary: 'Every symptom, those met most often first',
		group,
		answer: { status: 200, what: 'All of them, in one page.', shape: pageOf(symptomSummaryShape) }
	},
	{
		method: 'get',
		path: '/symptoms/{id}',
		id: 'readSymptom',
		summary: 'Definition, thresholds, counts, runbooks and recent incidents of a symptom',
		group,
		params: { id: z.enum(SYMPTOM_IDS) },
		answer: { status: 200, what: 'The symptom.', shape: symptomPageShape }
	}
];
