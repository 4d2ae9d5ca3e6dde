import type { AttemptOutcome } from '$lib/domain/incident/attempt';
import type { IncidentState, Severity } from '$lib/domain/incident/incident';

export { writeCause } from '$lib/domain/symptom/id-words';

/** What a severity means to those who wait. */
export const SEVERITY_WORDS: Record<Severity, string> = {
	1: 'business stands still',
	2: 'hurts now',
	3: 'slower',
	4: 'noticed'
};

/** A move as a verb for its button. */
export const MOVE_VERBS: Record<IncidentState, string> = {
	open: 'It came back',
	contained: 'Contained',
	resolved: 'Resolved',
	reviewed: 'Reviewed'
};

/** How an attempt ended, in words. */
export const OUTCOME_WORDS: Record<AttemptOutcome, string> = {
	worked: 'worked',
	partly: 'worked partly',
	'no-effect': 'no effect',
	'made-worse': 'made it worse'
};
