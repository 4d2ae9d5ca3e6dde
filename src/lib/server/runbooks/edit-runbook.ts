import { can } from '$lib/domain/person/can';
import type { Actor } from '$lib/domain/person/person';
import { fail, ok, type Outcome } from '$lib/domain/problem';
import { standingAfterEdit } from '$lib/domain/runbook/review';
import type { Runbook } from '$lib/domain/runbook/runbook';
import type { RunbookInput, RunbookPatch } from '$lib/domain/runbook/runbook-input';
import { findFreeSlug } from '$lib/domain/runbook/slug';
import { record } from '../audit/audit-service';
import { toJson } from '../db/json';
import { write, type Transaction } from '../db/transaction';
import { runbookChanged } from '../search/indexing';
import { standingOf, toWork } from './describe-runbook';
import { changedMeanwhile, noRunbook } from './refusals';
import { findNewest, listSlugs, type StoredRunbook } from './runbook-store';
import { insertRevision, insertRunbook, updatePlace } from './runbook-write-store';

/** The newest text of a runbook, just written or moved; that it is there is certain. */
export async function readNewest(slug: string): Promise<Outcome<Runbook>> {
	const stored = await findNewest(slug);
	return stored === null ? noRunbook(slug) : ok(await toWork(stored));
}

/** Makes a draft: its name in addresses comes from the title, whoever writes it looks after it. */
export async function create(actor: Actor, input: RunbookInput): Promise<Outcome<Runbook>> {
	if (!can(actor, 'runbook.draft')) return fail('forbidden', 'Drafting a runbook takes a responder.');
	const now = new Date().toISOString();
	const slug = await write(async (transaction) => {
		const free = findFreeSlug(input.title, new Set(await listSlugs()));
		await insertRunbook(
			{
				slug: free,
				state: 'draft',
				ownerId: actor.personId,
				reviewDue: null,
				now,
				createdById: actor.personId
			},
			input,
			transaction
		);
		await record(actor, 'runbook.create', `runbook:${free}`, { title: input.title }, transaction);
		await runbookChanged(free, transaction);
		return free;
	});
	return readNewest(slug);
}

function inputOf(stored: StoredRunbook): RunbookInput {
	const { title, summary, body, engines, symptoms, reviewEveryDays } = stored;
	return { title, summary, body, engines, symptoms, reviewEveryDays };
}

function mayEdit(actor: Actor, stored: StoredRunbook): Outcome<null> {
	if (!can(actor, 'runbook.edit', { ownerId: stored.owner?.id ?? null }))
		return fail('forbidden', 'A runbook is edited by whoever looks after it, or by a curator.');
	if (stored.state === 'retired' && !can(actor, 'runbook.publish'))
		return fail('forbidden', 'It is retired: a curator takes it up again.');
	return ok(null);
}

async function writeRevision(
	actor: Actor,
	before: StoredRunbook,
	input: RunbookInput,
	note: string | null,
	transaction: Transaction
): Promise<void> {
	const now = new Date().toISOString();
	const revision = before.newestRevision + 1;
	const standing = standingAfterEdit(standingOf(before));
	const staysPublished = standing.state === 'published';
	await insertRevision(
		{ runbookId: before.id, revision, now, createdById: actor.personId, note },
		input,
		transaction
	);
	await updatePlace(
		before.id,
		{
			state: standing.state,
			draftState: standing.draft,
			revision,
			publishedRevision: staysPublished ? before.publishedRevision : null,
			reviewerId: staysPublished ? (before.reviewer?.id ?? null) : null,
			reviewDue: staysPublished ? before.reviewDue : null,
			updatedAt: now
		},
		transaction
	);
	const changed = Object.entries(input).filter(
		([name, value]) => toJson(value) !== toJson(before[name as keyof RunbookInput])
	);
	const detail = { revision, changed: changed.map(([name]) => name) };
	await record(actor, 'runbook.update', `runbook:${before.slug}`, detail, transaction);
	await runbookChanged(before.slug, transaction);
}

/**
 * Changes a text: a new revision, which is a draft. What is published stays published until the new text is. An
 * edit that changes nothing makes no revision; one based on another revision than the newest is stale.
 */
export async function update(
	actor: Actor,
	slug: string,
	revision: number,
	patch: RunbookPatch
): Promise<Outcome<Runbook>> {
	if (!can(actor, 'runbook.draft')) return fail('forbidden', 'Editing a runbook takes a responder.');
	const written = await write(async (transaction): Promise<Outcome<null>> => {
		const before = await findNewest(slug);
		if (before === null) return noRunbook(slug);
		const may = mayEdit(actor, before);
		if (!may.ok) return may;
		if (before.newestRevision !== revision) return changedMeanwhile(slug, revision, await toWork(before));
		const { note, ...fields } = patch;
		const was = inputOf(before);
		const given = Object.entries(fields).filter(([, value]) => value !== undefined);
		const input: RunbookInput = { ...was, ...(Object.fromEntries(given) as Partial<RunbookInput>) };
		if (toJson(input) !== toJson(was)) await writeRevision(actor, before, input, note ?? null, transaction);
		return ok(null);
	});
	return written.ok ? readNewest(slug) : written;
}
