import type { CreationAttributes, InferAttributes } from 'sequelize';
import type { IncidentSummary, IncidentState, Origin, Severity } from '$lib/domain/incident/incident';
import type { Person } from '$lib/domain/person/person';
import type { SymptomId } from '$lib/domain/symptom/symptom';
import { fromJson, toJson } from '../db/json';
import { IncidentModel } from '../db/models/incident';
import { IncidentRevisionModel } from '../db/models/incident-revision';
import { IncidentSymptomModel } from '../db/models/incident-symptom';
import { select, selectOne } from '../db/query';
import type { Transaction } from '../db/transaction';

/** An incident as the database holds it, with the names of its people and its symptoms. */
export interface IncidentRow {
	number: number;
	title: string;
	narrative: string;
	service: string | null;
	engine: string | null;
	engineVersion: string | null;
	database: string | null;
	severity: Severity;
	state: IncidentState;
	ownerId: number | null;
	ownerName: string | null;
	origin: Origin;
	startedAt: string | null;
	detectedAt: string | null;
	containedAt: string | null;
	resolvedAt: string | null;
	cause: string | null;
	resolution: string | null;
	labels: string;
	revision: number;
	mergedInto: number | null;
	createdAt: string;
	createdById: number | null;
	createdByName: string | null;
	updatedAt: string;
	/** JSON list of symptom ids, heaviest first. */
	symptomIds: string;
}

export const SUMMARY_COLUMNS = `i.*, owner.name AS ownerName, creator.name AS createdByName,
	(SELECT json_group_array(s.symptomId ORDER BY s.weight DESC, s.symptomId)
		FROM incidentSymptoms s WHERE s.incidentNumber = i.number) AS symptomIds`;
export const SUMMARY_JOINS = `LEFT JOIN people owner ON owner.id = i.ownerId
	LEFT JOIN people creator ON creator.id = i.createdById`;

/** A person as others see them; null where the row names nobody (the system). */
export function toPerson(id: number | null, name: string | null): Person | null {
	return id === null ? null : { id, name: name ?? '' };
}

/** What a list shows of a row. */
export function toSummary(row: IncidentRow): IncidentSummary {
	return {
		number: row.number,
		title: row.title,
		narrative: row.narrative,
		service: row.service,
		engine: row.engine,
		engineVersion: row.engineVersion,
		database: row.database,
		severity: row.severity,
		state: row.state,
		owner: toPerson(row.ownerId, row.ownerName),
		origin: row.origin,
		startedAt: row.startedAt,
		detectedAt: row.detectedAt,
		containedAt: row.containedAt,
		resolvedAt: row.resolvedAt,
		cause: row.cause,
		resolution: row.resolution,
		labels: fromJson<string[]>(row.labels),
		revision: row.revision,
		createdAt: row.createdAt,
		createdBy: toPerson(row.createdById, row.createdByName),
		updatedAt: row.updatedAt,
		symptoms: fromJson<SymptomId[]>(row.symptomIds),
		recurrence: null,
		mergedInto: row.mergedInto
	};
}

/** The incident of that number; null where there is none. */
export function findIncident(number: number): Promise<IncidentRow | null> {
	return selectOne<IncidentRow>(
		`SELECT ${SUMMARY_COLUMNS} FROM incidents i ${SUMMARY_JOINS} WHERE i.number = :number`,
		{ number }
	);
}

/** Whether there is an incident of that number. */
export async function hasIncident(number: number): Promise<boolean> {
	return (await selectOne('SELECT number FROM incidents WHERE number = :number', { number })) !== null;
}

/** Writes a new incident and answers its number. */
export async function insertIncident(
	values: CreationAttributes<IncidentModel>,
	transaction: Transaction
): Promise<number> {
	const created = await IncidentModel.create(values, { transaction });
	return created.number;
}

/** The columns that an edit may change. */
export type IncidentChanges = Partial<
	Omit<InferAttributes<IncidentModel>, 'number' | 'createdAt' | 'createdById' | 'origin'>
>;

/** Writes changed columns. */
export async function updateIncident(
	number: number,
	changes: IncidentChanges,
	transaction: Transaction
): Promise<void> {
	await IncidentModel.update(changes, { where: { number }, transaction });
}

/** Notes that something of the incident changed, though none of its own fields did. */
export async function touchIncident(number: number, now: string, transaction: Transaction): Promise<void> {
	await IncidentModel.update({ updatedAt: now }, { where: { number }, transaction });
}

/** Keeps what an edit replaced. */
export async function keepRevision(
	kept: { number: number; revision: number; changedById: number | null; changedAt: string; before: object },
	transaction: Transaction
): Promise<void> {
	await IncidentRevisionModel.create(
		{
			incidentNumber: kept.number,
			revision: kept.revision,
			changedById: kept.changedById,
			changedAt: kept.changedAt,
			before: toJson(kept.before)
		},
		{ transaction }
	);
}

/** Puts these symptoms in the place of those that the incident had. */
export async function replaceSymptoms(
	number: number,
	weights: ReadonlyMap<SymptomId, number>,
	transaction: Transaction
): Promise<void> {
	await IncidentSymptomModel.destroy({ where: { incidentNumber: number }, transaction });
	await IncidentSymptomModel.bulkCreate(
		[...weights].map(([symptomId, weight]) => ({ incidentNumber: number, symptomId, weight })),
		{ transaction }
	);
}

/** The services that incidents name, the most frequent first. */
export function listServices(): Promise<{ service: string; incidents: number }[]> {
	return select(
		`SELECT service, COUNT(*) AS incidents FROM incidents
		WHERE service IS NOT NULL GROUP BY service ORDER BY incidents DESC, service`
	);
}

/** The person of that id who may still sign in; null otherwise. */
export function findActivePerson(id: number): Promise<Person | null> {
	return selectOne<Person>('SELECT id, name FROM people WHERE id = :id AND deactivatedAt IS NULL', { id });
}
