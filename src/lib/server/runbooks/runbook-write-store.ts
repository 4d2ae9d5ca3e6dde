import type { DraftState } from '$lib/domain/runbook/review';
import type { RunbookState } from '$lib/domain/runbook/runbook';
import type { RunbookInput } from '$lib/domain/runbook/runbook-input';
import { toJson } from '../db/json';
import { RunbookModel } from '../db/models/runbook';
import { RunbookRevisionModel } from '../db/models/runbook-revision';
import type { Transaction } from '../db/transaction';

/** What a new runbook is stored with. */
export interface NewRunbook {
	slug: string;
	state: RunbookState;
	ownerId: number | null;
	reviewDue: string | null;
	now: string;
	createdById: number | null;
}

/** Writes a runbook with its first revision. */
export async function insertRunbook(
	meta: NewRunbook,
	input: RunbookInput,
	transaction: Transaction
): Promise<void> {
	const created = await RunbookModel.create(
		{
			slug: meta.slug,
			state: meta.state,
			ownerId: meta.ownerId,
			reviewerId: null,
			reviewDue: meta.reviewDue,
			revision: 1,
			publishedRevision: meta.state === 'published' ? 1 : null,
			createdAt: meta.now,
			updatedAt: meta.now
		},
		{ transaction }
	);
	await insertRevision(
		{ runbookId: created.id, revision: 1, now: meta.now, createdById: meta.createdById, note: null },
		input,
		transaction
	);
}

/** Where a revision belongs, and who wrote it. */
export interface NewRevision {
	runbookId: number;
	revision: number;
	now: string;
	createdById: number | null;
	note: string | null;
}

/** Writes one text of a runbook. */
export async function insertRevision(
	meta: NewRevision,
	input: RunbookInput,
	transaction: Transaction
): Promise<void> {
	await RunbookRevisionModel.create(
		{
			runbookId: meta.runbookId,
			revision: meta.revision,
			title: input.title,
			summary: input.summary,
			body: input.body,
			engines: toJson(input.engines),
			symptoms: toJson(input.symptoms),
			reviewEveryDays: input.reviewEveryDays,
			createdAt: meta.now,
			createdById: meta.createdById,
			note: meta.note
		},
		{ transaction }
	);
}

/** Where a runbook stands after a move or an edit. */
export interface RunbookPlace {
	state: RunbookState;
	draftState: DraftState | null;
	revision: number;
	publishedRevision: number | null;
	reviewerId: number | null;
	reviewDue: string | null;
	updatedAt: string;
}

/** Writes where a runbook stands now. */
export async function updatePlace(id: number, place: RunbookPlace, transaction: Transaction): Promise<void> {
	await RunbookModel.update(place, { where: { id }, transaction });
}

/** Names who looks after a runbook and who reads it against the manual. */
export async function updateKeepers(
	slug: string,
	keepers: { ownerId: number | null; reviewerId: number | null; reviewDue: string | null },
	transaction: Transaction
): Promise<void> {
	await RunbookModel.update(keepers, { where: { slug }, transaction });
}
