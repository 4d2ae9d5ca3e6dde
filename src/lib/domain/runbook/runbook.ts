import type { Caution } from '../caution/caution';
import type { Person } from '../person/person';
import type { Engine } from '../reading/reading';
import type { SymptomId } from '../symptom/symptom';
import type { DraftState } from './review';

export const RUNBOOK_STATES = ['draft', 'in-review', 'published', 'retired'] as const;
export type RunbookState = (typeof RUNBOOK_STATES)[number];

export const STEP_KINDS = ['check', 'action', 'verify', 'undo', 'wait'] as const;
export type StepKind = (typeof STEP_KINDS)[number];

/** One action in a runbook. */
export interface Step {
	number: number;
	title: string;
	kind: StepKind;
	/** The step's own text, Markdown, without its heading. */
	body: string;
	/** Statements in the order in which they stand, as written. */
	sql: string[];
	/** A caution written by a curator, Markdown; null: none. */
	caution: string | null;
}

/** How often attempts with it ended how. */
export interface RunbookRecord {
	worked: number;
	partly: number;
	noEffect: number;
	madeWorse: number;
}

export interface RunbookSummary {
	slug: string;
	title: string;
	summary: string;
	engines: Engine[];
	symptoms: SymptomId[];
	reviewEveryDays: number;
	state: RunbookState;
	revision: number;
	owner: Person | null;
	reviewer: Person | null;
	reviewDue: string | null;
	record: RunbookRecord;
	/** The highest caution level of its statements. */
	level: 0 | 1 | 2 | 3;
	/** A newer text than the published one; null: there is none. */
	draft: { revision: number; state: DraftState } | null;
}

export interface Runbook extends Omit<RunbookSummary, 'level' | 'draft'> {
	/** Markdown. */
	body: string;
	steps: (Omit<Step, 'body' | 'sql' | 'caution'> & { statements: Caution[] })[];
}
