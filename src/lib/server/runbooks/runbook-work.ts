import { can } from '$lib/domain/person/can';
import type { Actor, Person } from '$lib/domain/person/person';
import { fail, ok, type Outcome } from '$lib/domain/problem';
import { standingAfter, workStateOf, type ReviewAction } from '$lib/domain/runbook/review';
import { approvalOf, type RevisionEvent } from '$lib/domain/runbook/revision';
import type { RunbookState } from '$lib/domain/runbook/runbook';
import type { PreviewInput, RunbookInput } from '$lib/domain/runbook/runbook-input';
import { drawText, standingOf, toWork, type DrawnText } from './describe-runbook';
import { listPublishReasons, listTextReasons } from './publish-reasons';
import { needsReader, noRunbook } from './refusals';
import { findRevision, listEvents } from './revision-store';
import { findNewest, type StoredRunbook } from './runbook-store';
import { weighBody } from './weigh-runbook';

/** Where the newest text stands, and what this person may do with it. */
export interface RunbookWork {
	/** The newest revision and its state; it is what every button is about. */
	revision: number;
	state: RunbookState;
	/** null: nothing is published. */
	publishedRevision: number | null;
	/** null: it came with Catchwater. */
	author: Person | null;
	/** What was done with this revision, earliest first. */
	events: RevisionEvent[];
	approval: RevisionEvent | null;
	/** Why it cannot be published now; empty where nothing waits to be. */
	reasons: string[];
	may: Record<'edit' | ReviewAction, boolean>;
}

function whatMay(actor: Actor, stored: StoredRunbook, hasApproval: boolean): RunbookWork['may'] {
	const standing = standingOf(stored);
	const isCurator = can(actor, 'runbook.publish');
	const isOwn = can(actor, 'runbook.edit', { ownerId: stored.owner?.id ?? null });
	const allows = (action: ReviewAction) => standingAfter(standing, action) !== null;
	const isAuthor = actor.personId === null || actor.personId === stored.authorId;
	return {
		edit: isOwn && (stored.state !== 'retired' || isCurator),
		submit: isOwn && allows('submit'),
		return: isOwn && allows('return'),
		approve: isCurator && allows('approve') && !isAuthor && !hasApproval,
		publish: isCurator && allows('publish'),
		retire: isCurator && allows('retire')
	};
}

/** Where a runbook's newest text stands, for the page that shows the buttons. */
export async function readWork(actor: Actor, slug: string): Promise<Outcome<RunbookWork>> {
	if (!can(actor, 'runbook.read')) return needsReader();
	const stored = await findNewest(slug);
	if (stored === null) return noRunbook(slug);
	const { id, newestRevision } = stored;
	const [text, allEvents] = await Promise.all([
		findRevision(id, newestRevision),
		listEvents(id, [newestRevision])
	]);
	const events = allEvents.get(newestRevision) ?? [];
	const state = workStateOf(standingOf(stored));
	const approval = approvalOf(events);
	const isUnderWay = state === 'draft' || state === 'in-review';
	return ok({
		revision: newestRevision,
		state,
		publishedRevision: stored.publishedRevision,
		author: text?.createdBy ?? null,
		events,
		approval: state === 'in-review' ? approval : null,
		reasons: isUnderWay ? await listPublishReasons(stored) : [],
		may: whatMay(actor, stored, state === 'in-review' && approval !== null)
	});
}

/** The newest text as the editor opens it; forbidden to whom may not change it. */
export async function readForEdit(
	actor: Actor,
	slug: string
): Promise<Outcome<RunbookInput & { slug: string; revision: number; state: RunbookState }>> {
	const work = await readWork(actor, slug);
	if (!work.ok) return work;
	if (!work.value.may.edit)
		return fail('forbidden', 'A runbook is edited by whoever looks after it, or by a curator.');
	const stored = await findNewest(slug);
	if (stored === null) return noRunbook(slug);
	const { title, summary, body, engines, symptoms, reviewEveryDays, revision, state } = await toWork(stored);
	return ok({ slug, revision, state, title, summary, body, engines, symptoms, reviewEveryDays });
}

/** An unsaved text as it would be read, with what still keeps it from being published. */
export interface RunbookPreview extends DrawnText {
	reasons: string[];
}

/** Draws a text that is not stored, with the caution of every statement. `slug` is null for a new runbook. */
export async function preview(
	actor: Actor,
	slug: string | null,
	input: PreviewInput
): Promise<Outcome<RunbookPreview>> {
	if (!can(actor, 'runbook.draft')) return fail('forbidden', 'Drafting a runbook takes a responder.');
	const steps = await weighBody(input);
	const reasons = await listTextReasons(input.body, steps, slug);
	return ok({ ...drawText(input.body, steps), reasons });
}
