import { can } from '$lib/domain/person/can';
import type { Actor, Person } from '$lib/domain/person/person';
import { fail, ok, type Outcome } from '$lib/domain/problem';
import { startOfWeeks, sumSpillWeeks } from '$lib/domain/watch/spill-weeks';
import type { AttemptUnderWay, NextStep, Watch, WatchedIncident } from '$lib/domain/watch/watch';
import { findOverflow } from './find-overflow';
import * as store from './watch-store';

/** More open incidents than this are a matter for the list, not for a glance. */
const INCIDENTS_SHOWN = 50;
const ATTEMPTS_SHOWN = 50;
const REVIEWS_SHOWN = 20;
const FIXES_SHOWN = 5;
const WEEKS_SHOWN = 12;
/** A review that falls due within a fortnight can still be fitted in. */
const REVIEW_AHEAD_DAYS = 14;
const DAY_MS = 24 * 60 * 60 * 1000;

/** What needs a person now, and beside it the last twelve weeks' temporary files and the latest fixes that worked. */
export async function overview(actor: Actor, now: Date = new Date()): Promise<Outcome<Watch>> {
	if (!can(actor, 'watch.read')) return fail('forbidden', 'Your role may not see the Watch.');
	const reviewsBy = new Date(now.getTime() + REVIEW_AHEAD_DAYS * DAY_MS).toISOString();
	const [counts, open, contained, attemptRows, reviews, logs, worked] = await Promise.all([
		store.countIncidents(),
		store.findIncidents('open', INCIDENTS_SHOWN),
		store.findIncidents('containedWithoutCause', INCIDENTS_SHOWN),
		store.findAttemptsUnderWay(ATTEMPTS_SHOWN),
		store.findReviewsDue(reviewsBy, REVIEWS_SHOWN),
		store.findLogSpills(startOfWeeks(now, WEEKS_SHOWN)),
		store.findWorked(FIXES_SHOWN)
	]);
	const attempts = attemptRows.map(toAttempt);
	const spills = await store.findSpills([...open, ...contained].map((incident) => incident.number));
	const watched = (row: store.IncidentRow) => toWatched(row, spills, attempts);
	return ok({
		at: now.toISOString(),
		open: open.map(watched),
		openTotal: counts.open,
		contained: contained.map(watched),
		containedTotal: counts.contained,
		attempts,
		reviews: reviews.map(({ ownerId, ownerName, ...review }) => ({
			...review,
			owner: toPerson(ownerId, ownerName)
		})),
		weeks: sumSpillWeeks(logs, now, WEEKS_SHOWN),
		worked,
		incidents: counts.all
	});
}

function toWatched(
	row: store.IncidentRow,
	spills: readonly store.SpillRow[],
	attempts: readonly AttemptUnderWay[]
): WatchedIncident {
	const { ownerId, ownerName, hasEvidence, runbooks, ...incident } = row;
	const attempt = attempts.find((running) => running.incident === row.number);
	return {
		...incident,
		owner: toPerson(ownerId, ownerName),
		overflow: findOverflow(spills.filter((spill) => spill.incident === row.number)),
		next: findNext(ownerId !== null, attempt, hasEvidence === 1, runbooks)
	};
}

/** The most pressing thing to do: somebody has to be on it before anything else is. */
function findNext(
	taken: boolean,
	attempt: AttemptUnderWay | undefined,
	hasEvidence: boolean,
	runbooks: number
): NextStep {
	if (!taken) return { kind: 'take' };
	if (attempt !== undefined) {
		const { id, runbook, title, step, of } = attempt;
		return step === null
			? { kind: 'record', attempt: id, runbook, title }
			: { kind: 'follow', attempt: id, runbook, title, step, of };
	}
	if (!hasEvidence) return { kind: 'evidence' };
	return runbooks > 0 ? { kind: 'runbook', count: runbooks } : { kind: 'write' };
}

function toAttempt({ byId, byName, ...row }: store.AttemptRow): AttemptUnderWay {
	return { ...row, by: toPerson(byId, byName) };
}

function toPerson(id: number | null, name: string | null): Person | null {
	return id === null || name === null ? null : { id, name };
}
