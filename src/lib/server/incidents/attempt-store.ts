import type { CreationAttributes, InferAttributes } from 'sequelize';
import type { Attempt, AttemptOutcome, AttemptStep } from '$lib/domain/incident/attempt';
import type { Place } from '../api/cursor';
import { AttemptModel } from '../db/models/attempt';
import { AttemptStepModel } from '../db/models/attempt-step';
import { select, selectOne } from '../db/query';
import type { Transaction } from '../db/transaction';
import { toPerson } from './incident-store';

interface AttemptRow {
	id: number;
	runbookSlug: string | null;
	runbookRevision: number | null;
	title: string;
	startedAt: string;
	endedAt: string | null;
	byId: number | null;
	byName: string | null;
	outcome: AttemptOutcome | null;
	note: string | null;
	beforeEvidenceId: number | null;
	afterEvidenceId: number | null;
	revision: number;
}

interface StepRow {
	attemptId: number;
	number: number;
	tickedAt: string | null;
	byId: number | null;
	byName: string | null;
	skipped: string | null;
}

const FROM = 'SELECT a.*, p.name AS byName FROM attempts a LEFT JOIN people p ON p.id = a.byId';

function toStep(row: StepRow): AttemptStep {
	return {
		number: row.number,
		tickedAt: row.tickedAt,
		by: toPerson(row.byId, row.byName),
		skipped: row.skipped
	};
}

function toAttempt(row: AttemptRow, steps: AttemptStep[]): Attempt {
	return {
		id: row.id,
		runbook: row.runbookSlug,
		runbookRevision: row.runbookRevision,
		title: row.title,
		startedAt: row.startedAt,
		endedAt: row.endedAt,
		by: toPerson(row.byId, row.byName),
		steps,
		outcome: row.outcome,
		note: row.note,
		before: row.beforeEvidenceId,
		after: row.afterEvidenceId,
		comparison: null,
		revision: row.revision
	};
}

async function withSteps(rows: readonly AttemptRow[]): Promise<Attempt[]> {
	if (rows.length === 0) return [];
	const stepRows = await select<StepRow>(
		`SELECT s.*, p.name AS byName FROM attemptSteps s LEFT JOIN people p ON p.id = s.byId
		WHERE s.attemptId IN (:ids) ORDER BY s.attemptId, s.number`,
		{ ids: rows.map((row) => row.id) }
	);
	return rows.map((row) => toAttempt(row, stepRows.filter((step) => step.attemptId === row.id).map(toStep)));
}

/** The attempts of an incident, earliest first: all of them, or `limit` after a place. */
export async function listAttempts(
	incidentNumber: number,
	page: { after: Place | null; limit: number } | null = null
): Promise<Attempt[]> {
	const after = page?.after ?? null;
	const rows = await select<AttemptRow>(
		`${FROM} WHERE a.incidentNumber = :incidentNumber
		${after === null ? '' : 'AND (a.startedAt, a.id) > (:afterKey, :afterId)'}
		ORDER BY a.startedAt, a.id ${page === null ? '' : 'LIMIT :pageSize'}`,
		{
			incidentNumber,
			...(after === null ? {} : { afterKey: after.key, afterId: after.id }),
			...(page === null ? {} : { pageSize: page.limit })
		}
	);
	return withSteps(rows);
}

/** How many attempts an incident has. */
export async function countAttempts(incidentNumber: number): Promise<number> {
	const row = await selectOne<{ total: number }>(
		'SELECT COUNT(*) AS total FROM attempts WHERE incidentNumber = :incidentNumber',
		{ incidentNumber }
	);
	return row?.total ?? 0;
}

/** One attempt of an incident; null where that incident has none of that id. */
export async function findAttempt(incidentNumber: number, id: number): Promise<Attempt | null> {
	const row = await selectOne<AttemptRow>(`${FROM} WHERE a.incidentNumber = :incidentNumber AND a.id = :id`, {
		incidentNumber,
		id
	});
	const [attempt] = row === null ? [] : await withSteps([row]);
	return attempt ?? null;
}

/** Writes a new attempt with its steps, none of them done, and answers its id. */
export async function insertAttempt(
	values: CreationAttributes<AttemptModel>,
	stepNumbers: readonly number[],
	transaction: Transaction
): Promise<number> {
	const created = await AttemptModel.create(values, { transaction });
	await AttemptStepModel.bulkCreate(
		stepNumbers.map((number) => ({
			attemptId: created.id,
			number,
			tickedAt: null,
			byId: null,
			skipped: null
		})),
		{ transaction }
	);
	return created.id;
}

/** The columns that an edit may change. */
export type AttemptChanges = Partial<
	Pick<
		InferAttributes<AttemptModel>,
		'title' | 'endedAt' | 'outcome' | 'note' | 'beforeEvidenceId' | 'afterEvidenceId'
	>
>;

/** Writes changed columns and the next revision. */
export async function updateAttempt(
	before: Attempt,
	changes: AttemptChanges,
	transaction: Transaction
): Promise<void> {
	await AttemptModel.update(
		{ ...changes, revision: before.revision + 1 },
		{ where: { id: before.id }, transaction }
	);
}

/** Writes what became of single steps. */
export async function updateSteps(
	attemptId: number,
	steps: readonly { number: number; tickedAt: string | null; byId: number | null; skipped: string | null }[],
	transaction: Transaction
): Promise<void> {
	for (const { number, ...values } of steps)
		await AttemptStepModel.update(values, { where: { attemptId, number }, transaction });
}
