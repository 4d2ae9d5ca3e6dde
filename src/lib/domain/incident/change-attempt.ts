import { fail, ok, type FieldIssue, type Outcome } from '../problem';
import type { Attempt } from './attempt';
import type { AttemptPatch } from './incident-input';

/** What became of a step, to be written. `byId` is null for a step that is neither ticked nor skipped. */
export interface StepChange {
	number: number;
	tickedAt: string | null;
	byId: number | null;
	skipped: string | null;
}

/** The columns of an attempt after an edit, and the steps that it changes. */
export interface AttemptChange {
	title: string;
	outcome: Attempt['outcome'];
	endedAt: string | null;
	note: string | null;
	before: number | null;
	after: number | null;
	steps: StepChange[];
	/** Nothing is different from before. */
	isSame: boolean;
}

type StepPatch = NonNullable<AttemptPatch['steps']>[number];

function isTicked(step: StepPatch): boolean {
	return step.ticked === true || (step.ticked === undefined && typeof step.tickedAt === 'string');
}

function findStepIssues(attempt: Attempt, steps: readonly StepPatch[]): FieldIssue[] {
	const issues: FieldIssue[] = [];
	const seen = new Set<number>();
	for (const [index, step] of steps.entries()) {
		const field = `steps[${index}].number`;
		if (attempt.steps.length === 0)
			issues.push({ field, message: 'This attempt follows no runbook: it has no steps.' });
		else if (!attempt.steps.some(({ number }) => number === step.number))
			issues.push({ field, message: `The runbook has no step ${step.number}.` });
		if (seen.has(step.number)) issues.push({ field, message: `Step ${step.number} is named twice.` });
		seen.add(step.number);
		if (isTicked(step) && typeof step.skipped === 'string')
			issues.push({ field: `steps[${index}].skipped`, message: 'A step is either done or skipped.' });
	}
	return issues;
}

/** Ticking takes back a skip, skipping takes back a tick; anything else leaves the step undone. */
function changeStep(step: StepPatch, personId: number | null, now: string): StepChange {
	const { number } = step;
	if (typeof step.skipped === 'string')
		return { number, tickedAt: null, byId: personId, skipped: step.skipped };
	if (isTicked(step)) return { number, tickedAt: step.tickedAt ?? now, byId: personId, skipped: null };
	return { number, tickedAt: null, byId: null, skipped: null };
}

function endOf(
	attempt: Attempt,
	patch: AttemptPatch,
	outcome: Attempt['outcome'],
	now: string
): string | null {
	if (patch.endedAt !== undefined && patch.endedAt !== null) return patch.endedAt;
	// Taking the outcome back takes the end back: it goes on.
	if (outcome === null) return patch.outcome === null || patch.endedAt === null ? null : attempt.endedAt;
	return patch.endedAt === null ? now : (attempt.endedAt ?? now);
}

/**
 * An attempt after a merge patch. Only the steps named change; an outcome ends the attempt now, where no end
 * is given. `invalid` names steps that the runbook doesn't have, and an end before the start.
 */
export function changeAttempt(
	attempt: Attempt,
	patch: AttemptPatch,
	context: { personId: number | null; now: string }
): Outcome<AttemptChange> {
	const { personId, now } = context;
	const outcome = patch.outcome === undefined ? attempt.outcome : patch.outcome;
	const endedAt = endOf(attempt, patch, outcome, now);
	const errors = findStepIssues(attempt, patch.steps ?? []);
	if (endedAt !== null && Date.parse(endedAt) < Date.parse(attempt.startedAt))
		errors.push({ field: 'endedAt', message: `It can't have ended before it began (${attempt.startedAt}).` });
	if (errors.length > 0) return fail('invalid', 'The attempt does not fit.', { errors });
	const steps = (patch.steps ?? []).map((step) => changeStep(step, personId, now));
	const change = {
		title: patch.title ?? attempt.title,
		outcome,
		endedAt,
		note: patch.note === undefined ? attempt.note : patch.note,
		before: patch.before === undefined ? attempt.before : patch.before,
		after: patch.after === undefined ? attempt.after : patch.after,
		steps
	};
	const isSame =
		steps.length === 0 &&
		(['title', 'outcome', 'endedAt', 'note', 'before', 'after'] as const).every(
			(field) => change[field] === attempt[field]
		);
	return ok({ ...change, isSame });
}
