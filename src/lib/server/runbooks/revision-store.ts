import type { Person } from '$lib/domain/person/person';
import type { Engine } from '$lib/domain/reading/reading';
import type { ReviewAction } from '$lib/domain/runbook/review';
import type { RevisionEvent } from '$lib/domain/runbook/revision';
import type { SymptomId } from '$lib/domain/symptom/symptom';
import { fromJson } from '../db/json';
import { RunbookReviewModel } from '../db/models/runbook-review';
import { select } from '../db/query';
import type { Transaction } from '../db/transaction';

/** A text of a runbook as it is stored. */
export interface StoredRevision {
	revision: number;
	title: string;
	summary: string;
	body: string;
	engines: Engine[];
	symptoms: SymptomId[];
	reviewEveryDays: number;
	createdAt: string;
	createdBy: Person | null;
	note: string | null;
}

interface Row extends Omit<StoredRevision, 'engines' | 'symptoms' | 'createdBy'> {
	engines: string;
	symptoms: string;
	byId: number | null;
	byName: string | null;
}

function toRevision({ engines, symptoms, byId, byName, ...row }: Row): StoredRevision {
	return {
		...row,
		engines: fromJson<Engine[]>(engines),
		symptoms: fromJson<SymptomId[]>(symptoms),
		createdBy: byId === null ? null : { id: byId, name: byName ?? '' }
	};
}

const SELECT = `SELECT r.revision, r.title, r.summary, r.body, r.engines, r.symptoms, r.reviewEveryDays, r.createdAt,
	r.note, r.createdById AS byId, p.name AS byName
	FROM runbookRevisions r LEFT JOIN people p ON p.id = r.createdById`;

/** Revisions of a runbook below `below` (null: from the newest on), the newest first. */
export async function listRevisions(
	runbookId: number,
	below: number | null,
	limit: number
): Promise<StoredRevision[]> {
	const rows = await select<Row>(
		`${SELECT} WHERE r.runbookId = :runbookId ${below === null ? '' : 'AND r.revision < :below'}
		ORDER BY r.revision DESC LIMIT :limit`,
		{ runbookId, below, limit }
	);
	return rows.map(toRevision);
}

/** One revision; null: the runbook has none of that number. */
export async function findRevision(runbookId: number, revision: number): Promise<StoredRevision | null> {
	const [row] = await select<Row>(`${SELECT} WHERE r.runbookId = :runbookId AND r.revision = :revision`, {
		runbookId,
		revision
	});
	return row === undefined ? null : toRevision(row);
}

/** What was done with some revisions, by revision, earliest first. */
export async function listEvents(
	runbookId: number,
	revisions: readonly number[]
): Promise<Map<number, RevisionEvent[]>> {
	const events = new Map<number, RevisionEvent[]>(revisions.map((revision) => [revision, []]));
	if (revisions.length === 0) return events;
	const rows = await select<
		Omit<RevisionEvent, 'by'> & { revision: number; byId: number | null; byName: string | null }
	>(
		`SELECT v.revision, v.action, v.at, v.note, v.byId, p.name AS byName
		FROM runbookReviews v LEFT JOIN people p ON p.id = v.byId
		WHERE v.runbookId = :runbookId AND v.revision IN (:revisions) ORDER BY v.id`,
		{ runbookId, revisions }
	);
	for (const { revision, action, at, note, byId, byName } of rows) {
		const by = byId === null ? null : { id: byId, name: byName ?? '' };
		events.get(revision)?.push({ action, by, at, note });
	}
	return events;
}

/** Notes what somebody did with a revision. */
export async function insertEvent(
	event: {
		runbookId: number;
		revision: number;
		action: ReviewAction;
		byId: number | null;
		at: string;
		note: string | null;
	},
	transaction: Transaction
): Promise<void> {
	await RunbookReviewModel.create(event, { transaction });
}
