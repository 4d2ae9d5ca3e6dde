import type { Attempt, AttemptOutcome } from '$lib/domain/incident/attempt';
import { changeAttempt, type AttemptChange } from '$lib/domain/incident/change-attempt';
import type { AttemptInput, AttemptPatch } from '$lib/domain/incident/incident-input';
import type { PageQuery } from '$lib/domain/incident/incident-filter';
import type { Page } from '$lib/domain/page';
import { can } from '$lib/domain/person/can';
import type { Actor } from '$lib/domain/person/person';
import { fail, ok, type FieldIssue, type Outcome } from '$lib/domain/problem';
import { cutPage, readCursor } from '../api/cursor';
import { record } from '../audit/audit-service';
import { write, type Transaction } from '../db/transaction';
import { findEvidence, findNewestPlan } from '../evidence/evidence-store';
import { refreshIncident } from '../evidence/refresh-incident';
import * as runbooks from '../runbooks/runbooks-service';
import { incidentChanged } from '../search/indexing';
import {
	countAttempts,
	findAttempt,
	insertAttempt,
	listAttempts,
	updateAttempt,
	updateSteps
} from './attempt-store';
import { withComparisons } from './compare-attempts';
import { insertEntry } from './entry-store';
import { hasIncident, touchIncident } from './incident-store';
import { escapeMarkdown } from './log-changes';
import { changedMeanwhile, needsResponder, noIncident } from './refusals';

const FIRST_PAGE: PageQuery = { limit: 200 };

const OUTCOME_WORDS: Record<AttemptOutcome, string> = {
	worked: 'it worked',
	partly: 'it worked partly',
	'no-effect': 'it had no effect',
	'made-worse': 'it made things worse'
};

function noAttempt(number: number, id: number): Outcome<never> {
	return fail('not_found', `Incident ${number} has no attempt ${id}.`);
}

/** A page of an incident's attempts, earliest first. */
export async function list(
	actor: Actor,
	number: number,
	query: PageQuery = FIRST_PAGE
): Promise<Outcome<Page<Attempt>>> {
	if (!can(actor, 'attempt.read')) return fail('forbidden', 'Reading attempts takes a reader.');
	if (!(await hasIncident(number))) return noIncident(number);
	const name = `attempts ${number}`;
	const after = readCursor(name, query.cursor);
	if (!after.ok) return after;
	const [found, total] = await Promise.all([
		listAttempts(number, { after: after.value, limit: query.limit + 1 }),
		countAttempts(number)
	]);
	const { rows, next } = cutPage(found, query.limit, name, ({ startedAt, id }) => ({ key: startedAt, id }));
	return ok({ items: await withComparisons(rows), next, total });
}

/** One attempt with its comparison; null where the incident has none of that id. */
async function findCompared(number: number, id: number): Promise<Attempt | null> {
	const attempt = await findAttempt(number, id);
	const [compared] = attempt === null ? [] : await withComparisons([attempt]);
	return compared ?? null;
}

/** One attempt of an incident. */
export async function read(actor: Actor, number: number, id: number): Promise<Outcome<Attempt>> {
	if (!can(actor, 'attempt.read')) return fail('forbidden', 'Reading attempts takes a reader.');
	const attempt = await findCompared(number, id);
	return attempt === null ? noAttempt(number, id) : ok(attempt);
}

/** What an attempt follows: a runbook's published revision, or nothing but its title. */
interface Plan {
	runbookSlug: string | null;
	runbookRevision: number | null;
	title: string;
	stepNumbers: number[];
}

function invalid(field: string, message: string): Outcome<never> {
	return fail('invalid', message, { errors: [{ field, message }] });
}

async function planAttempt(actor: Actor, input: AttemptInput): Promise<Outcome<Plan>> {
	const { runbook: slug, title } = input;
	if (slug === undefined || slug === null) {
		if (title === undefined) return invalid('title', 'Name a runbook, or say in a few words what is tried.');
		return ok({ runbookSlug: null, runbookRevision: null, title, stepNumbers: [] });
	}
	const found = await runbooks.read(actor, slug);
	if (!found.ok)
		return found.problem.code === 'not_found' ? invalid('runbook', `There is no runbook ${slug}.`) : found;
	const runbook = found.value;
	if (runbook.state !== 'published') {
		const reason = `The runbook ${slug} is ${runbook.state}: only a published one is followed on a server.`;
		return fail('refused', reason, { reasons: [reason] });
	}
	return ok({
		runbookSlug: slug,
		runbookRevision: runbook.revision,
		title: title ?? runbook.title,
		stepNumbers: runbook.steps.map(({ number }) => number)
	});
}

/** Evidence of another incident, or of none, proves nothing here. */
async function checkEvidence(
	number: number,
	named: { before?: number | null | undefined; after?: number | null | undefined }
): Promise<Outcome<null>> {
	const errors: FieldIssue[] = [];
	for (const [field, id] of Object.entries(named)) {
		if (id === undefined || id === null) continue;
		if ((await findEvidence(number, id)) === null)
			errors.push({ field, message: `Incident ${number} has no evidence ${id}.` });
	}
	return errors.length === 0
		? ok(null)
		: fail('invalid', 'The evidence is not of this incident.', { errors });
}

async function logAttempt(
	actor: Actor,
	line: { number: number; at: string; now: string; text: string },
	transaction: Transaction
): Promise<void> {
	const { number: incidentNumber, at, now, text } = line;
	await insertEntry(
		{ incidentNumber, at, text, authorId: actor.personId, kind: 'attempt', createdAt: now },
		transaction
	);
	await touchIncident(incidentNumber, now, transaction);
	await incidentChanged(incidentNumber, transaction);
}

/**
 * Starts an attempt: of a published runbook, whose steps it copies, or of a free action with a title. Before is
 * the incident's newest plan, unless the input names another one or none.
 */
export async function start(actor: Actor, number: number, input: AttemptInput): Promise<Outcome<Attempt>> {
	if (!can(actor, 'attempt.write')) return needsResponder();
	const now = new Date().toISOString();
	if (!(await hasIncident(number))) return noIncident(number);
	const planned = await planAttempt(actor, input);
	if (!planned.ok) return planned;
	const { stepNumbers, ...plan } = planned.value;
	const startedAt = input.startedAt ?? now;
	const written = await write(async (transaction): Promise<Outcome<number>> => {
		const evidence = await checkEvidence(number, { before: input.before });
		if (!evidence.ok) return evidence;
		const id = await insertAttempt(
			{
				...plan,
				incidentNumber: number,
				startedAt,
				endedAt: null,
				byId: actor.personId,
				outcome: null,
				note: input.note ?? null,
				beforeEvidenceId: input.before === undefined ? await findNewestPlan(number) : input.before,
				afterEvidenceId: null,
				revision: 1
			},
			stepNumbers,
			transaction
		);
		await record(actor, 'attempt.start', `attempt:${id}`, { incident: number, ...plan }, transaction);
		const text = `Started: ${escapeMarkdown(plan.title)}.`;
		await logAttempt(actor, { number, at: startedAt, now, text }, transaction);
		return ok(id);
	});
	return written.ok ? read(actor, number, written.value) : written;
}

function describeOutcome(before: Attempt, change: AttemptChange): string | null {
	if (change.outcome === before.outcome) return null;
	const title = escapeMarkdown(change.title);
	return change.outcome === null
		? `${title}: the outcome was taken back, it goes on.`
		: `${title}: ${OUTCOME_WORDS[change.outcome]}.`;
}

async function writeChange(
	actor: Actor,
	number: number,
	before: Attempt,
	change: AttemptChange,
	transaction: Transaction
): Promise<void> {
	const now = new Date().toISOString();
	await updateAttempt(
		before,
		{
			title: change.title,
			endedAt: change.endedAt,
			outcome: change.outcome,
			note: change.note,
			beforeEvidenceId: change.before,
			afterEvidenceId: change.after
		},
		transaction
	);
	await updateSteps(before.id, change.steps, transaction);
	await record(
		actor,
		'attempt.update',
		`attempt:${before.id}`,
		{ incident: number, outcome: change.outcome, steps: change.steps.map((step) => step.number) },
		transaction
	);
	// What the plan after shows is no symptom of the incident any more, or is one again.
	const symptomsMove = change.after !== before.after;
	if (symptomsMove) await refreshIncident(number, [], now, transaction);
	const text = describeOutcome(before, change);
	if (text === null) {
		await touchIncident(number, now, transaction);
		if (symptomsMove) await incidentChanged(number, transaction);
	} else await logAttempt(actor, { number, at: change.endedAt ?? now, now, text }, transaction);
}

/** Ticks and skips steps by number, records the outcome, names the evidence before and after. */
export async function update(
	actor: Actor,
	number: number,
	id: number,
	revision: number,
	patch: AttemptPatch
): Promise<Outcome<Attempt>> {
	if (!can(actor, 'attempt.write')) return needsResponder();
	const written = await write(async (transaction): Promise<Outcome<null>> => {
		const before = await findAttempt(number, id);
		if (before === null) return noAttempt(number, id);
		if (before.revision !== revision)
			return changedMeanwhile(`Attempt ${id}`, revision, await findCompared(number, id));
		const change = changeAttempt(before, patch, {
			personId: actor.personId,
			now: new Date().toISOString()
		});
		if (!change.ok) return change;
		if (change.value.isSame) return ok(null);
		const evidence = await checkEvidence(number, { before: patch.before, after: patch.after });
		if (!evidence.ok) return evidence;
		await writeChange(actor, number, before, change.value, transaction);
		return ok(null);
	});
	return written.ok ? read(actor, number, id) : written;
}
