import type { PageQuery } from '$lib/domain/incident/incident-filter';
import type { Page } from '$lib/domain/page';
import { can } from '$lib/domain/person/can';
import type { Actor } from '$lib/domain/person/person';
import { fail, ok, type Outcome } from '$lib/domain/problem';
import { compareRevisions, type RunbookComparison } from '$lib/domain/runbook/compare-revisions';
import { workStateOf } from '$lib/domain/runbook/review';
import type { RevisionEvent, RevisionSummary, RunbookRevision } from '$lib/domain/runbook/revision';
import type { RunbookState } from '$lib/domain/runbook/runbook';
import type { CompareQuery } from '$lib/domain/runbook/runbook-input';
import { cutPage, readCursor } from '../api/cursor';
import { standingOf } from './describe-runbook';
import { needsReader, noRunbook } from './refusals';
import { findRevision, listEvents, listRevisions, type StoredRevision } from './revision-store';
import { findNewest, type StoredRunbook } from './runbook-store';
import { weighRunbook } from './weigh-runbook';

const FIRST_PAGE: PageQuery = { limit: 200 };

const noRevision = (slug: string, revision: number) =>
	fail('not_found', `The runbook ${slug} has no revision ${revision}.`);

/** null: a later one took its place. */
function stateOf(newest: StoredRunbook, revision: number): RunbookState | null {
	if (revision === newest.publishedRevision) return newest.state;
	// A newer text that was dropped with its runbook is neither a draft nor retired.
	const isUnderWay = newest.publishedRevision === null || newest.draftState !== null;
	return revision === newest.newestRevision && isUnderWay ? workStateOf(standingOf(newest)) : null;
}

function toSummary(
	newest: StoredRunbook,
	stored: StoredRevision,
	events: readonly RevisionEvent[]
): RevisionSummary {
	const { revision, title, createdAt, createdBy, note } = stored;
	return {
		revision,
		title,
		state: stateOf(newest, revision),
		createdAt,
		createdBy,
		note,
		events: [...events]
	};
}

/** One page of a runbook's revisions, the newest first, with what was done with each. */
export async function revisions(
	actor: Actor,
	slug: string,
	query: PageQuery = FIRST_PAGE
): Promise<Outcome<Page<RevisionSummary>>> {
	if (!can(actor, 'runbook.read')) return needsReader();
	const newest = await findNewest(slug);
	if (newest === null) return noRunbook(slug);
	const name = `revisions ${slug}`;
	const after = readCursor(name, query.cursor);
	if (!after.ok) return after;
	const found = await listRevisions(newest.id, after.value?.id ?? null, query.limit + 1);
	const { rows, next } = cutPage(found, query.limit, name, ({ revision }) => ({ key: '', id: revision }));
	const events = await listEvents(
		newest.id,
		rows.map(({ revision }) => revision)
	);
	const items = rows.map((stored) => toSummary(newest, stored, events.get(stored.revision) ?? []));
	// Revisions are numbered from 1 without a gap.
	return ok({ items, next, total: newest.newestRevision });
}

/** One revision with its text. */
export async function revision(
	actor: Actor,
	slug: string,
	number: number
): Promise<Outcome<RunbookRevision>> {
	if (!can(actor, 'runbook.read')) return needsReader();
	const newest = await findNewest(slug);
	if (newest === null) return noRunbook(slug);
	const stored = await findRevision(newest.id, number);
	if (stored === null) return noRevision(slug, number);
	const events = await listEvents(newest.id, [number]);
	const { summary, body, engines, symptoms, reviewEveryDays } = stored;
	return ok({
		slug,
		...toSummary(newest, stored, events.get(number) ?? []),
		...{ summary, body, engines, symptoms, reviewEveryDays }
	});
}

/** What is different between two revisions: cautions whose level changed first, then the text by word. */
export async function compare(
	actor: Actor,
	slug: string,
	{ from, to }: CompareQuery
): Promise<Outcome<RunbookComparison>> {
	if (!can(actor, 'runbook.read')) return needsReader();
	const newest = await findNewest(slug);
	if (newest === null) return noRunbook(slug);
	const [before, after] = await Promise.all([findRevision(newest.id, from), findRevision(newest.id, to)]);
	if (before === null) return noRevision(slug, from);
	if (after === null) return noRevision(slug, to);
	const side = async (stored: StoredRevision) => ({
		revision: stored.revision,
		input: stored,
		steps: await weighRunbook(`${slug} ${stored.revision} ${stored.engines.join()} ${stored.body}`, stored)
	});
	return ok(compareRevisions(slug, await side(before), await side(after)));
}
