import { listRequiredChecks } from '$lib/domain/caution/required-checks';
import type { Attempt, AttemptOutcome } from '$lib/domain/incident/attempt';
import type { Evidence } from '$lib/domain/incident/incident';
import { can } from '$lib/domain/person/can';
import type { Actor } from '$lib/domain/person/person';
import { fail, ok, type Outcome } from '$lib/domain/problem';
import { suggestBlanks } from './suggest-blanks';
import * as evidence from '../evidence/evidence-service';
import { removeFromSpool } from '../evidence/spool';
import type { Upload } from '../evidence/upload';
import * as attempts from '../incidents/attempts-service';
import { nameAttempt } from '../incidents/compare-attempts';
import * as entries from '../incidents/entries-service';
import * as incidents from '../incidents/incidents-service';
import * as people from '../people/people-service';
import * as runbooks from '../runbooks/runbooks-service';

/** Which attempt, in which incident, by which runbook: all three have to fit together. */
export interface Place {
	slug: string;
	incident: number;
	attempt: number;
}

/** An attempt with the steps of the runbook's revision that it follows. */
interface Followed {
	attempt: Attempt;
	page: runbooks.RunbookPage;
}

async function find(actor: Actor, place: Place): Promise<Outcome<Followed>> {
	const attempt = await attempts.read(actor, place.incident, place.attempt);
	if (!attempt.ok) return attempt;
	const { runbook, runbookRevision } = attempt.value;
	if (runbook !== place.slug || runbookRevision === null)
		return fail('not_found', `Attempt ${place.attempt} does not follow the runbook ${place.slug}.`);
	const page = await runbooks.readPage(actor, place.slug, runbookRevision);
	return page.ok ? ok({ attempt: attempt.value, page: page.value }) : page;
}

/** Instead of a step: what came of it. No step has this number. */
export const CONCLUDE = 0;

/** The first step that is neither ticked nor skipped; CONCLUDE: there is none. */
function findNext(attempt: Attempt): number {
	return attempt.steps.find((step) => step.tickedAt === null && step.skipped === null)?.number ?? CONCLUDE;
}

/**
 * One step to be done, with everything that the checklist shows round it: the one that is `wanted`, else the
 * first that is not done. CONCLUDE wants none.
 */
export async function read(actor: Actor, place: Place, wanted: number | null) {
	const [found, incident, responders] = await Promise.all([
		find(actor, place),
		incidents.read(actor, place.incident),
		can(actor, 'incident.write') ? people.listResponders(actor) : ok([])
	]);
	if (!found.ok) return found;
	if (!incident.ok) return incident;
	if (!responders.ok) return responders;
	const { attempt, page } = found.value;
	const { number, title, revision, evidence: pieces } = incident.value;
	const next = attempt.outcome === null ? findNext(attempt) : CONCLUDE;
	const current = page.steps.find((step) => step.number === (wanted ?? next)) ?? null;
	const { slug, state } = page.runbook;
	return ok({
		// The comparison goes along as it is shown: two plans may have thousands of operators.
		attempt: { ...attempt, comparison: null },
		comparison: nameAttempt(attempt, pieces),
		incident: { number, title, revision },
		evidence: pieces.map(({ id, name }) => ({ id, name })),
		runbook: { slug, title: page.runbook.title, state },
		steps: page.steps.map((step) => ({ number: step.number, title: step.title })),
		/** null: the outcome is asked for, or stands. */
		current,
		/** What the evidence says for blanks of the statements, by name. */
		suggested: suggestBlanks(pieces),
		/** To whom it may be handed over. */
		others: responders.value.filter(({ id }) => id !== actor.personId),
		/** What has to be ticked before the statements of the step may be copied. */
		checks: current === null ? [] : listRequiredChecks(current.statements)
	});
}

/** Ticks a step; refused while its caution or one of its prechecks is not ticked. */
export async function tick(
	actor: Actor,
	place: Place,
	input: { step: number; revision: number; checks: readonly number[] }
): Promise<Outcome<Attempt>> {
	const found = await find(actor, place);
	if (!found.ok) return found;
	const step = found.value.page.steps.find((known) => known.number === input.step);
	const missing = listRequiredChecks(step?.statements ?? []).filter(
		(_check, index) => !input.checks.includes(index)
	);
	if (missing.length > 0)
		return fail('refused', 'Tick these before the step is done, or skip it with a reason.', {
			reasons: missing
		});
	return attempts.update(actor, place.incident, place.attempt, input.revision, {
		steps: [{ number: input.step, ticked: true }]
	});
}

/** Changes an attempt that really follows this runbook. */
async function change(
	actor: Actor,
	place: Place,
	revision: number,
	patch: Parameters<typeof attempts.update>[4]
): Promise<Outcome<Attempt>> {
	const found = await find(actor, place);
	return found.ok ? attempts.update(actor, place.incident, place.attempt, revision, patch) : found;
}

/** Skips a step, with the reason for whoever reads it later. */
export function skip(
	actor: Actor,
	place: Place,
	input: { step: number; revision: number; reason: string }
): Promise<Outcome<Attempt>> {
	return change(actor, place, input.revision, { steps: [{ number: input.step, skipped: input.reason }] });
}

/** Takes back a tick or a skip. */
export function takeBack(
	actor: Actor,
	place: Place,
	input: { step: number; revision: number }
): Promise<Outcome<Attempt>> {
	return change(actor, place, input.revision, {
		steps: [{ number: input.step, ticked: false, skipped: null }]
	});
}

/** The piece that an attempt is judged by: the first plan, or whatever was given. */
function chooseAfter(pieces: readonly Evidence[]): number | null {
	return (pieces.find(({ kind }) => kind === 'plan') ?? pieces[0])?.id ?? null;
}

/**
 * Records what came of it, which ends the attempt. `given`: files in the spool that show it, attached to the
 * incident first; they stay there when the record itself is refused.
 */
export async function conclude(
	actor: Actor,
	place: Place,
	input: {
		revision: number;
		outcome: AttemptOutcome;
		note: string | null;
		after: number | null;
		given?: readonly Upload[];
	}
): Promise<Outcome<Attempt>> {
	const { revision, given = [], ...patch } = input;
	if (given.length === 0) return change(actor, place, revision, patch);
	const found = await find(actor, place);
	if (!found.ok) {
		await removeFromSpool(given.map(({ path }) => path));
		return found;
	}
	const attached = await evidence.attach(actor, place.incident, given);
	if (!attached.ok) return attached;
	return attempts.update(actor, place.incident, place.attempt, revision, {
		...patch,
		after: chooseAfter(attached.value)
	});
}

/**
 * Stops in the middle: the log says where and what comes next, and `to` is on the incident from now on. Nobody
 * (null) puts it first on the Watch. The attempt stays under way for whoever goes on.
 */
export async function handOver(
	actor: Actor,
	place: Place,
	input: { incidentRevision: number; note: string; to: number | null }
): Promise<Outcome<null>> {
	const found = await find(actor, place);
	if (!found.ok) return found;
	const freed = await incidents.update(actor, place.incident, input.incidentRevision, { owner: input.to });
	if (!freed.ok) return freed;
	const { attempt } = found.value;
	const done = attempt.steps.filter((step) => step.tickedAt !== null || step.skipped !== null).length;
	const text = `Stopped and handed over after step ${done} of ${attempt.steps.length}.\n\n${input.note}`;
	const added = await entries.add(actor, place.incident, { text });
	return added.ok ? ok(null) : added;
}
