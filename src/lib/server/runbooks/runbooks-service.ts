import type { Page } from '$lib/domain/page';
import { can } from '$lib/domain/person/can';
import type { Actor } from '$lib/domain/person/person';
import { ok, type Outcome } from '$lib/domain/problem';
import type { Engine } from '$lib/domain/reading/reading';
import { wilsonInterval, triedOf } from '$lib/domain/runbook/record';
import type { Runbook, RunbookSummary } from '$lib/domain/runbook/runbook';
import type { RunbookFilter } from '$lib/domain/runbook/runbook-filter';
import type { SymptomId } from '$lib/domain/symptom/symptom';
import { cutPage, readCursor } from '../api/cursor';
import { toPage, toRunbook, toSummary, type StepPage } from './describe-runbook';
import { needsReader, noRunbook } from './refusals';
import { listRunbookAttempts, type RunbookAttempt } from './runbook-attempts';
import { countRunbooks, findRunbook, listForSymptoms, listRunbooks } from './runbook-store';

export { adoptContent } from './adopt-content';
export { create, update } from './edit-runbook';
export { publish, retire, review } from './review-runbook';
export { compare, revision, revisions } from './runbook-history';
export { preview, readForEdit, readWork, type RunbookPreview, type RunbookWork } from './runbook-work';

const LIST = 'runbooks';
const PAGE_SIZE = 50;

/** One page of the runbooks that a filter leaves, by title, with how many there are in all. */
export async function list(
	actor: Actor,
	filter: Partial<RunbookFilter> = {}
): Promise<Outcome<Page<RunbookSummary>>> {
	if (!can(actor, 'runbook.read')) return needsReader();
	const whole: RunbookFilter = { ...filter, limit: filter.limit ?? PAGE_SIZE };
	const after = readCursor(LIST, whole.cursor);
	if (!after.ok) return after;
	const [found, total] = await Promise.all([
		listRunbooks(whole, { after: after.value, limit: whole.limit + 1 }),
		countRunbooks(whole)
	]);
	const { rows, next } = cutPage(found, whole.limit, LIST, ({ title, id }) => ({ key: title, id }));
	return ok({ items: await Promise.all(rows.map(toSummary)), next, total });
}

/** The runbook with its steps, and what every statement does. */
export async function read(actor: Actor, slug: string): Promise<Outcome<Runbook>> {
	if (!can(actor, 'runbook.read')) return needsReader();
	const stored = await findRunbook(slug);
	return stored === null ? noRunbook(slug) : ok(await toRunbook(stored));
}

/** All that a runbook's page shows. */
export interface RunbookPage {
	runbook: Runbook;
	/** What stands before the steps; sanitised. */
	introductionHtml: string;
	steps: StepPage[];
	/** What stands after them; sanitised, empty where there is nothing. */
	remarksHtml: string;
	/** The latest first. */
	attempts: RunbookAttempt[];
}

/**
 * The runbook as its page draws it: rendered, with the attempts made with it. An attempt goes on by the
 * `revision` that it began with, whatever was published since.
 */
export async function readPage(
	actor: Actor,
	slug: string,
	revision: number | null = null
): Promise<Outcome<RunbookPage>> {
	if (!can(actor, 'runbook.read')) return needsReader();
	const stored = await findRunbook(slug, revision);
	if (stored === null) return noRunbook(slug);
	const [runbook, page, attempts] = await Promise.all([
		toRunbook(stored),
		toPage(stored),
		listRunbookAttempts(slug)
	]);
	return ok({ runbook, ...page, attempts });
}

/**
 * The published runbooks for any of these symptoms on an engine (null: on any), the best first: those that
 * serve more of the symptoms, the earlier ones counting more, then those that worked most surely (Wilson's
 * lower bound). Empty where nothing serves.
 */
export async function forSymptoms(
	actor: Actor,
	symptoms: readonly SymptomId[],
	engine: Engine | null
): Promise<Outcome<RunbookSummary[]>> {
	if (!can(actor, 'runbook.read')) return needsReader();
	const wanted = [...new Set(symptoms)];
	const found = await listForSymptoms(wanted, engine === 'unknown' ? null : engine);
	const weighed = found.map((runbook) => ({
		runbook,
		fit: wanted.reduce((sum, id, index) => sum + (runbook.symptoms.includes(id) ? 1 / (index + 1) : 0), 0),
		surety: wilsonInterval(runbook.record.worked, triedOf(runbook.record)).low
	}));
	weighed.sort(
		(a, b) => b.fit - a.fit || b.surety - a.surety || a.runbook.title.localeCompare(b.runbook.title)
	);
	return ok(await Promise.all(weighed.map(({ runbook }) => toSummary(runbook))));
}
