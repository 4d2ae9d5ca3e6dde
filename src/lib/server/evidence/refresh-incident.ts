import { prefillFrom } from '$lib/domain/incident/prefill';
import type { LogHints, Reading } from '$lib/domain/reading/reading';
import type { SymptomId } from '$lib/domain/symptom/symptom';
import type { Transaction } from '../db/transaction';
import {
	findIncident,
	replaceSymptoms,
	updateIncident,
	type IncidentChanges,
	type IncidentRow
} from '../incidents/incident-store';
import { listEvidence, listEvidenceOfFault } from './evidence-store';

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

/** What several logs say, as one would. */
function joinHints(hints: readonly LogHints[]): LogHints {
	return {
		applications: hints.flatMap(({ applications }) => applications),
		databases: hints.flatMap(({ databases }) => databases),
		users: hints.flatMap(({ users }) => users)
	};
}

/** What the evidence knows of the setting, by the rules that fill the form; only where that is still empty. */
function fillSetting(
	incident: Pick<IncidentRow, 'engine' | 'engineVersion' | 'service' | 'database'>,
	readings: readonly Reading[],
	hints: readonly LogHints[]
): IncidentChanges {
	const told = prefillFrom(readings, joinHints(hints));
	const engine = incident.engine ?? told.engine?.value ?? null;
	// Another engine's version would be worse than none.
	const version = engine === told.engine?.value ? (told.engineVersion?.value ?? null) : null;
	return {
		engine,
		engineVersion: incident.engineVersion ?? version,
		service: incident.service ?? told.service?.value ?? null,
		database: incident.database ?? told.database?.value ?? null
	};
}

/**
 * Brings an incident into line with its evidence: its symptoms are the union over all readings but those of
 * evidence after a remedy, which show what is left of them; engine, version, service and database are filled where nobody gave them, and never overwritten. Its revision stays: whoever
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
	const ofFault = (await listEvidenceOfFault(number)).flatMap((evidence) => evidence.readings);
	await replaceSymptoms(number, weighSymptoms(ofFault), transaction);
	const readings = (await listEvidence(number)).flatMap((evidence) => evidence.readings);
	await updateIncident(number, { ...fillSetting(incident, readings, hints), updatedAt: now }, transaction);
}
