import type { CreationAttributes, InferAttributes } from 'sequelize';
import type { Evidence, EvidenceKind } from '$lib/domain/incident/incident';
import type { Reading } from '$lib/domain/reading/reading';
import { fromJson, toJson } from '../db/json';
import { EvidenceModel } from '../db/models/evidence';
import { ReadingModel } from '../db/models/reading';
import { select, selectOne, type Replacements } from '../db/query';
import type { Transaction } from '../db/transaction';
import { toPerson } from '../incidents/incident-store';

/** A piece of evidence as the database holds it, with the name of whoever added it. */
export interface EvidenceRow {
	id: number;
	incidentNumber: number | null;
	sha256: string;
	name: string;
	bytes: number;
	kind: EvidenceKind;
	format: string;
	state: Evidence['state'];
	addedAt: string;
	addedById: number | null;
	addedByName: string | null;
}

const FROM = 'SELECT e.*, p.name AS addedByName FROM evidence e LEFT JOIN people p ON p.id = e.addedById';

async function withReadings(rows: readonly EvidenceRow[]): Promise<Evidence[]> {
	if (rows.length === 0) return [];
	const bodies = await select<{ evidenceId: number; body: string }>(
		'SELECT evidenceId, body FROM readings WHERE evidenceId IN (:ids) ORDER BY evidenceId, position',
		{ ids: rows.map((row) => row.id) }
	);
	return rows.map((row) => ({
		id: row.id,
		sha256: row.sha256,
		name: row.name,
		bytes: row.bytes,
		kind: row.kind,
		format: row.format,
		state: row.state,
		addedAt: row.addedAt,
		addedBy: toPerson(row.addedById, row.addedByName),
		readings: bodies
			.filter(({ evidenceId }) => evidenceId === row.id)
			.map(({ body }) => fromJson<Reading>(body))
	}));
}

function selectRows(condition: string, values: Replacements): Promise<EvidenceRow[]> {
	return select<EvidenceRow>(`${FROM} WHERE ${condition} ORDER BY e.id`, values);
}

/** The evidence of an incident with its readings, in the order in which it was added. */
export async function listEvidence(incidentNumber: number): Promise<Evidence[]> {
	return withReadings(await selectRows('e.incidentNumber = :incidentNumber', { incidentNumber }));
}

/** The evidence of an incident that tells what the incident was: without what shows how it is after a remedy. */
export async function listEvidenceOfFault(incidentNumber: number): Promise<Evidence[]> {
	return withReadings(
		await selectRows(
			`e.incidentNumber = :incidentNumber
			AND NOT EXISTS (SELECT 1 FROM attempts a WHERE a.afterEvidenceId = e.id)`,
			{ incidentNumber }
		)
	);
}

/** The id of the plan that was added to an incident last; null: it has none. */
export async function findNewestPlan(incidentNumber: number): Promise<number | null> {
	const row = await selectOne<{ id: number }>(
		`SELECT id FROM evidence WHERE incidentNumber = :incidentNumber AND kind = 'plan'
		ORDER BY addedAt DESC, id DESC LIMIT 1`,
		{ incidentNumber }
	);
	return row?.id ?? null;
}

/** Evidence of these ids with its readings, in the order of the ids. */
export async function readEvidenceById(ids: readonly number[]): Promise<Evidence[]> {
	if (ids.length === 0) return [];
	const found = await withReadings(await selectRows('e.id IN (:ids)', { ids }));
	return ids.flatMap((id) => found.find((evidence) => evidence.id === id) ?? []);
}

/** One piece of an incident's evidence; null where that incident has none of that id. */
export function findEvidence(incidentNumber: number, id: number): Promise<EvidenceRow | null> {
	return selectOne<EvidenceRow>(`${FROM} WHERE e.incidentNumber = :incidentNumber AND e.id = :id`, {
		incidentNumber,
		id
	});
}

/** The piece of evidence of that id, in whatever incident; null: there is none. */
export function findEvidenceById(id: number): Promise<EvidenceRow | null> {
	return selectOne<EvidenceRow>(`${FROM} WHERE e.id = :id`, { id });
}

/** The same bytes under this incident (null: under none), other than the row `except`; null: not there. */
export function findSameBytes(
	incidentNumber: number | null,
	sha256: string,
	except: number | null = null
): Promise<EvidenceRow | null> {
	return selectOne<EvidenceRow>(
		`${FROM} WHERE e.sha256 = :sha256 AND e.incidentNumber IS :incidentNumber AND e.id IS NOT :except
		ORDER BY e.id LIMIT 1`,
		{ sha256, incidentNumber, except }
	);
}

/** The first row that holds these bytes, whichever incident it belongs to; null: nobody holds them. */
export function findByBytes(sha256: string): Promise<EvidenceRow | null> {
	return selectOne<EvidenceRow>(`${FROM} WHERE e.sha256 = :sha256 ORDER BY e.id LIMIT 1`, { sha256 });
}

/** Evidence whose reading had not ended: under way, or cut off by the end of the process. */
export function listUnread(): Promise<EvidenceRow[]> {
	return selectRows("e.state = 'reading'", {});
}

/** All evidence whose masked bytes are stored, by id. */
export function listReadable(): Promise<EvidenceRow[]> {
	return selectRows("e.sha256 <> ''", {});
}

/** Writes a new row and answers its id. */
export async function insertEvidence(
	values: CreationAttributes<EvidenceModel>,
	transaction: Transaction
): Promise<number> {
	const created = await EvidenceModel.create(values, { transaction });
	return created.id;
}

/** Writes changed columns. */
export async function updateEvidence(
	id: number,
	changes: Partial<Omit<InferAttributes<EvidenceModel>, 'id'>>,
	transaction: Transaction
): Promise<void> {
	await EvidenceModel.update(changes, { where: { id }, transaction });
}

/** Removes a row and its readings. */
export async function deleteEvidence(id: number, transaction: Transaction): Promise<void> {
	await EvidenceModel.destroy({ where: { id }, transaction });
}

/** Puts these readings in the place of those that the evidence had. */
export async function replaceReadings(
	evidenceId: number,
	readings: readonly Reading[],
	transaction: Transaction
): Promise<void> {
	await ReadingModel.destroy({ where: { evidenceId }, transaction });
	await ReadingModel.bulkCreate(
		readings.map((reading, position) => ({ evidenceId, position, body: toJson(reading) })),
		{ transaction }
	);
}
