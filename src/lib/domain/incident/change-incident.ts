import { fail, ok, type Outcome } from '../problem';
import type { IncidentState, Severity } from './incident';
import type { IncidentInput, IncidentPatch } from './incident-input';
import { findMissingForResolved, findMoveRefusals } from './incident-moves';
import { findTimeIssues, INCIDENT_TIMES, type IncidentTimes } from './incident-times';

/** What people may say and change of an incident. */
export interface IncidentFacts extends IncidentTimes {
	title: string;
	narrative: string;
	service: string | null;
	engine: string | null;
	engineVersion: string | null;
	database: string | null;
	severity: Severity;
	state: IncidentState;
	ownerId: number | null;
	cause: string | null;
	resolution: string | null;
	labels: string[];
}
export type IncidentField = keyof IncidentFacts;

const DEFAULT_SEVERITY: Severity = 3;

const NOTHING: Omit<IncidentFacts, 'title'> = {
	narrative: '',
	service: null,
	engine: null,
	engineVersion: null,
	database: null,
	severity: DEFAULT_SEVERITY,
	state: 'open',
	ownerId: null,
	startedAt: null,
	detectedAt: null,
	containedAt: null,
	resolvedAt: null,
	cause: null,
	resolution: null,
	labels: []
};

const FIELDS = ['title', ...Object.keys(NOTHING)] as readonly IncidentField[];

/** A text as it is kept: one that says nothing is null. */
function toText(text: string | null): string | null {
	return text === null || text.trim() === '' ? null : text;
}

function toSeverity(value: number | null): Severity {
	return value === 1 || value === 2 || value === 3 || value === 4 ? value : DEFAULT_SEVERITY;
}

/** Lays a merge patch over what stands there: left out stays, null clears (RFC 7396). */
function merge(before: IncidentFacts, patch: IncidentPatch): IncidentFacts {
	const given = <T>(value: T | undefined, stands: T): T => (value === undefined ? stands : value);
	return {
		title: given(patch.title, before.title),
		narrative: given(patch.narrative, before.narrative) ?? '',
		service: toText(given(patch.service, before.service)),
		engine: given(patch.engine, before.engine),
		engineVersion: toText(given(patch.engineVersion, before.engineVersion)),
		database: toText(given(patch.database, before.database)),
		severity: toSeverity(given<number | null>(patch.severity, before.severity)),
		// A state can't be cleared: an incident always has one.
		state: patch.state ?? before.state,
		ownerId: given(patch.owner, before.ownerId),
		startedAt: given(patch.startedAt, before.startedAt),
		detectedAt: given(patch.detectedAt, before.detectedAt),
		containedAt: given(patch.containedAt, before.containedAt),
		resolvedAt: given(patch.resolvedAt, before.resolvedAt),
		cause: toText(given(patch.cause, before.cause)),
		resolution: toText(given(patch.resolution, before.resolution)),
		labels: [...new Set(given(patch.labels, before.labels) ?? [])]
	};
}

/** Stamps the time of a move where it wasn't given, and clears those that coming back makes untrue. */
function stampMove(before: IncidentFacts, after: IncidentFacts, patch: IncidentPatch, now: string): void {
	if (after.state === before.state) return;
	if (after.state === 'contained') after.containedAt ??= now;
	if (after.state === 'resolved' || after.state === 'reviewed') after.resolvedAt ??= now;
	if (after.state === 'open') {
		after.containedAt = patch.containedAt ?? null;
		after.resolvedAt = patch.resolvedAt ?? null;
	}
}

function checkTimes(facts: IncidentFacts, touched: ReadonlySet<string>): Outcome<null> {
	const errors = findTimeIssues(facts, touched);
	if (errors.length === 0) return ok(null);
	return fail('invalid', 'The times contradict each other.', { errors });
}

function isSame(one: unknown, other: unknown): boolean {
	return JSON.stringify(one) === JSON.stringify(other);
}

/** An incident after an edit, and which of its fields that changed. */
export interface IncidentChange {
	after: IncidentFacts;
	changed: IncidentField[];
}

/**
 * An incident after a merge patch: times stamped and in order, the move allowed. `refused` carries every
 * reason against the move, `invalid` the times that contradict each other.
 */
export function changeIncident(
	before: IncidentFacts,
	patch: IncidentPatch,
	now: string
): Outcome<IncidentChange> {
	const after = merge(before, patch);
	stampMove(before, after, patch, now);
	const reasons =
		before.state === after.state && (after.state === 'resolved' || after.state === 'reviewed')
			? // What a resolved incident says of its end may be corrected, not taken away.
				findMissingForResolved(after)
			: findMoveRefusals({ ...after, from: before.state, to: after.state, reason: patch.reason ?? null });
	if (reasons.length > 0) return fail('refused', reasons.join(' '), { reasons });
	const times = checkTimes(after, new Set(Object.keys(patch)));
	if (!times.ok) return times;
	return ok({ after, changed: FIELDS.filter((field) => !isSame(before[field], after[field])) });
}

/**
 * A new incident out of what was said of it. It is noticed now where no time at all is given. One that is
 * logged after its end (an import, a morning after) may be logged as such, with what resolving asks for.
 */
export function beginIncident(input: IncidentInput, now: string): Outcome<IncidentFacts> {
	const facts = merge({ ...NOTHING, title: input.title }, input);
	stampMove({ ...facts, state: 'open' }, facts, input, now);
	if (facts.state === 'resolved' || facts.state === 'reviewed') {
		const reasons = findMissingForResolved(facts);
		if (reasons.length > 0) return fail('refused', reasons.join(' '), { reasons });
	}
	if (INCIDENT_TIMES.every((name) => facts[name] === null)) facts.detectedAt = now;
	const times = checkTimes(facts, new Set(Object.keys(input)));
	return times.ok ? ok(facts) : times;
}
