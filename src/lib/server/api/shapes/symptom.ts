import { z } from 'zod';
import { CAUSE_IDS, SYMPTOM_IDS } from '$lib/domain/symptom/symptom';
import type { SymptomPage, SymptomSummary } from '$lib/domain/symptom/symptom-page';
import { incidentSummaryShape } from './incident';
import { runbookSummaryShape } from './runbook';
import { shapeOf, time } from './shape';

const counts = z.object({
	id: z.enum(SYMPTOM_IDS),
	title: z.string(),
	what: z.string(),
	incidents: z.number(),
	open: z.number().describe('Open or contained.'),
	lastAt: time.nullable()
});

/** A symptom in the list. */
export const symptomSummaryShape = shapeOf<SymptomSummary>()(
	'SymptomSummary',
	counts.extend({ runbooks: z.number().describe('Published runbooks that serve it.') })
);

/** A symptom with all that is known of it. */
export const symptomPageShape = shapeOf<SymptomPage>()(
	'SymptomPage',
	counts.extend({
		recognise: z.string(),
		thresholds: z.array(z.object({ name: z.string(), value: z.number(), unit: z.string(), why: z.string() })),
		usualCauses: z.array(z.object({ id: z.enum(CAUSE_IDS), title: z.string(), what: z.string() })),
		months: z.array(z.object({ month: z.string().describe('2026-03'), incidents: z.number() })),
		runbooks: z.array(runbookSummaryShape),
		recent: z.array(incidentSummaryShape)
	})
);
