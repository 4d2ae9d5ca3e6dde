import type { LogHints, Reading } from '$lib/domain/reading/reading';
import type { SymptomId } from '$lib/domain/symptom/symptom';
import type { Transaction } from '../db/transaction';
import {
	findIncident,
	replaceSymptoms,
	updateIncident,
	type IncidentChanges
} from '../incidents/incident-store';
import { listEvidence } from './evidence-store';

/** The heaviest weight of each symptom that the readings show. */
function weighSymptoms(readings: readonly Reading[]): Map<SymptomId, number> {
	const weights = new Map<SymptomId, number>();
	for (const { id, weight } of readings.flatMap((reading) => reading.symptoms)) {
		// Words are no evidence: a filter by symptom finds what was seen.
		if (id === 'told-in-words') continue;
		weights.set(id, Math.max(weight, weights.get(id) ?? 0));
	}
	return weights;
}

/** What the evidence knows of the setting; only where exactly that is still empty. */
function fillSetting(
	incident: {
		engine: string | null;
		engineVersion: string | null;
		service: string | null;
		database: string | null;
	},
	readings: readonly Reading[],
	hints: readonly LogHints[]
): IncidentChanges {
	const changes: IncidentChanges = {};
	const told = readings.find((reading) => reading.engine !== 'unknown');
	if (incident.engine === null && told !== undefined) changes.engine = told.engine;
	const engine = incident.engine ?? told?.engine;
	const versioned = readings.find((reading) => reading.engine === engine && reading.engineVersion !== null);
	if (incident.engineVersion === null && versioned !== undefined)
		changes.engineVersion = versioned.engineVersion;
	const service = hints.flatMap((hint) => hint.applications)[0];
	if (incident.service === null && service !== undefined) changes.service = service;
	const database = hints.flatMap((hint) => hint.databases)[0];
	if (incident.database === null && database !== undefined) changes.database = database;
	return changes;
}

/**
 * Brings an incident into line with its evidence: its symptoms are the union over all readings; engine,
 * version, service and database are filled where nobody gave them, and never overwritten. Its revision stays: whoever
 * edits a text meanwhile has nothing to reconcile.
 */
export async function refreshIncident(
	number: number,
	hints: readonly LogHints[],
	now: string,
	transaction: Transaction
): Promise<void> {
	const incident = await findIncident(number);
	if (incident === null) return;
	const readings = (await listEvidence(number)).flatMap((evidence) => evidence.readings);
	await replaceSymptoms(number, weighSymptoms(readings), transaction);
	await updateIncident(number, { ...fillSetting(incident, readings, hints), updatedAt: now }, transaction);
}
