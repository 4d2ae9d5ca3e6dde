import { can } from '$lib/domain/person/can';
import type { Actor } from '$lib/domain/person/person';
import { fail, ok, type Outcome } from '$lib/domain/problem';
import { nextReview, sayWhyNot, standingAfter, type ReviewAction } from '$lib/domain/runbook/review';
import { approvalOf } from '$lib/domain/runbook/revision';
import type { Runbook } from '$lib/domain/runbook/runbook';
import type { ReviewInput } from '$lib/domain/runbook/runbook-input';
import { record } from '../audit/audit-service';
import { write, type Transaction } from '../db/transaction';
import { runbookChanged } from '../search/indexing';
import { standingOf, toWork } from './describe-runbook';
import { readNewest } from './edit-runbook';
import { listPublishReasons } from './publish-reasons';
import { changedMeanwhile, noRunbook, refused } from './refusals';
import { insertEvent, listEvents } from './revision-store';
import { findNewest, type StoredRunbook } from './runbook-store';
import { updatePlace, type RunbookPlace } from './runbook-write-store';

/** What somebody does, and the revision that they had before them; null: they did not say. */
interface Move {
	action: ReviewAction;
	note: string | null;
	based: number | null;
}

/** Whether role and ownership allow the action at all. */
function mayMove(actor: Actor, action: ReviewAction, stored: StoredRunbook): Outcome<null> {
	const isOwn = can(actor, 'runbook.edit', { ownerId: stored.owner?.id ?? null });
	if (action === 'submit' || action === 'return')
		return isOwn
			? ok(null)
			: fail('forbidden', `A runbook is ${action}ed by whoever looks after it, or by a curator.`);
	return can(actor, 'runbook.publish')
		? ok(null)
		: fail('forbidden', 'Approving, publishing and retiring runbooks takes a curator.');
}

const REFUSED: Record<ReviewAction, string> = {
	submit: 'It was not submitted.',
	return: 'It was not returned.',
	approve: 'It was not approved.',
	publish: 'It was not published.',
	retire: 'It was not retired.'
};

/** Every reason against an action; empty: it may be. */
async function listReasons(actor: Actor, action: ReviewAction, stored: StoredRunbook): Promise<string[]> {
	if (action === 'publish') return listPublishReasons(stored);
	const reasons: string[] = [];
	const standing = standingOf(stored);
	if (standingAfter(standing, action) === null) reasons.push(sayWhyNot(standing, action));
	if (action !== 'approve') return reasons;
	if (actor.personId === null) reasons.push('An approval needs a person who stands for it.');
	else if (actor.personId === stored.authorId)
		reasons.push(`You wrote revision ${stored.newestRevision}: somebody else has to approve it.`);
	return reasons;
}

/** Who approved the newest text; null: nobody did. */
async function findApprover({ id, newestRevision }: StoredRunbook): Promise<number | null> {
	const events = await listEvents(id, [newestRevision]);
	return approvalOf(events.get(newestRevision) ?? [])?.by?.id ?? null;
}

/** Where the runbook stands after an action that is allowed. */
async function placeAfter(
	actor: Actor,
	action: ReviewAction,
	stored: StoredRunbook,
	now: string
): Promise<RunbookPlace> {
	const standing = standingAfter(standingOf(stored), action) ?? standingOf(stored);
	const place: RunbookPlace = {
		state: standing.state,
		draftState: standing.draft,
		revision: stored.newestRevision,
		publishedRevision: stored.publishedRevision,
		reviewerId: stored.reviewer?.id ?? null,
		reviewDue: stored.reviewDue,
		updatedAt: now
	};
	const isFirst = stored.state !== 'published';
	const readAgain = { reviewerId: actor.personId, reviewDue: nextReview(now, stored.reviewEveryDays) };
	switch (action) {
		case 'submit':
			return place;
		case 'return':
			return isFirst ? { ...place, reviewerId: null } : place;
		case 'approve':
			// Beside a published text the reviewer shown stays the one who read that.
			if (isFirst) return { ...place, reviewerId: actor.personId };
			return stored.draftState === null ? { ...place, ...readAgain } : place;
		case 'publish':
			return {
				...place,
				publishedRevision: stored.newestRevision,
				reviewerId: await findApprover(stored),
				reviewDue: readAgain.reviewDue
			};
		case 'retire':
			return { ...place, reviewDue: null };
	}
}

async function carryOut(
	actor: Actor,
	stored: StoredRunbook,
	{ action, note }: Move,
	transaction: Transaction
): Promise<void> {
	const now = new Date().toISOString();
	const place = await placeAfter(actor, action, stored, now);
	const revision = action === 'retire' ? (stored.publishedRevision ?? place.revision) : place.revision;
	await updatePlace(stored.id, place, transaction);
	await insertEvent(
		{ runbookId: stored.id, revision, action, byId: actor.personId, at: now, note },
		transaction
	);
	await record(actor, `runbook.${action}`, `runbook:${stored.slug}`, { revision, note }, transaction);
	await runbookChanged(stored.slug, transaction);
}

async function move(actor: Actor, slug: string, what: Move): Promise<Outcome<Runbook>> {
	if (!can(actor, 'runbook.draft')) return fail('forbidden', 'Changing a runbook takes a responder.');
	const moved = await write(async (transaction): Promise<Outcome<null>> => {
		const stored = await findNewest(slug);
		if (stored === null) return noRunbook(slug);
		const may = mayMove(actor, what.action, stored);
		if (!may.ok) return may;
		if (what.based !== null && what.based !== stored.newestRevision)
			return changedMeanwhile(slug, what.based, await toWork(stored));
		const reasons = await listReasons(actor, what.action, stored);
		if (reasons.length > 0) return refused(REFUSED[what.action], reasons);
		await carryOut(actor, stored, what, transaction);
		return ok(null);
	});
	return moved.ok ? readNewest(slug) : moved;
}

/**
 * Submits the newest text, returns it with a note, or approves it: nobody approves what they wrote. Approving a
 * published runbook without a newer text says that it was read again: its next review is an interval away.
 * `based` is the revision that was read; another one is stale.
 */
export function review(
	actor: Actor,
	slug: string,
	{ action, note }: ReviewInput,
	based: number | null = null
): Promise<Outcome<Runbook>> {
	return move(actor, slug, { action, note: note || null, based });
}

/** Publishes the newest text, which is approved and passes the gate; refused with every reason. */
export function publish(
	actor: Actor,
	slug: string,
	note: string | null = null,
	based: number | null = null
): Promise<Outcome<Runbook>> {
	return move(actor, slug, { action: 'publish', note: note || null, based });
}

/** Takes a published runbook out of use; attempts under way go on by the revision that they follow. */
export function retire(
	actor: Actor,
	slug: string,
	note: string | null = null,
	based: number | null = null
): Promise<Outcome<Runbook>> {
	return move(actor, slug, { action: 'retire', note: note || null, based });
}
