import type { Person } from '../person/person';
import type { Comparison } from '../reading/compare-readings';

export const OUTCOMES = ['worked', 'partly', 'no-effect', 'made-worse'] as const;
export type AttemptOutcome = (typeof OUTCOMES)[number];

/** A step of the runbook's revision that was ticked or skipped. */
export interface AttemptStep {
	number: number;
	tickedAt: string | null;
	by: Person | null;
	/** The reason; null: not skipped. */
	skipped: string | null;
}

/** A runbook, or a free action, tried in an incident. */
export interface Attempt {
	id: number;
	runbook: string | null;
	runbookRevision: number | null;
	title: string;
	startedAt: string;
	endedAt: string | null;
	by: Person | null;
	steps: AttemptStep[];
	outcome: AttemptOutcome | null;
	note: string | null;
	/** Ids of evidence. */
	before: number | null;
	after: number | null;
	/** Of the plans before and after; null while one of them is missing or holds no plan. */
	comparison: Comparison | null;
	revision: number;
}
