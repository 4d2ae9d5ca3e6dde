import type { Person } from '../person/person';
import type { ReviewAction } from './review';
import type { RunbookState } from './runbook';
import type { RunbookInput } from './runbook-input';

/** What somebody did with a revision, and what they said of it. */
export interface RevisionEvent {
	action: ReviewAction;
	by: Person | null;
	at: string;
	note: string | null;
}

/** A text of a runbook as the history lists it; it is never changed. */
export interface RevisionSummary {
	revision: number;
	title: string;
	/** null: a later one took its place. */
	state: RunbookState | null;
	createdAt: string;
	/** null: it came with Catchwater. */
	createdBy: Person | null;
	/** What its author said of the change. */
	note: string | null;
	/** Earliest first. */
	events: RevisionEvent[];
}

/** The whole text of a revision. */
export interface RunbookRevision extends RevisionSummary, RunbookInput {
	slug: string;
}

/** Who approved a revision, by what was last done with it; null: nobody, or it was returned since. */
export function approvalOf(events: readonly RevisionEvent[]): RevisionEvent | null {
	const last = events.at(-1);
	return last?.action === 'approve' ? last : null;
}
