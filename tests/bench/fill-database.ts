import { EvidenceModel } from '$lib/server/db/models/evidence';
import { IncidentModel } from '$lib/server/db/models/incident';
import { ReadingModel } from '$lib/server/db/models/reading';
import { write } from '$lib/server/db/transaction';
import { incidentChanged } from '$lib/server/search/indexing';
import { readFiles, type FolderIncident } from './evidence-folder';

/** Puts the incidents of a folder into the open database with their readings, indexed; answers their numbers. */
export async function fillDatabase(incidents: readonly FolderIncident[]): Promise<Map<string, number>> {
	const numbers = new Map<string, number>();
	for (const incident of incidents) {
		const read = await readFiles(incident.files);
		const engine = read
			.flatMap(({ readings }) => readings)
			.find((reading) => reading.engine !== 'unknown')?.engine;
		const at = incident.startedAt ?? '2026-01-01T00:00:00.000Z';
		const number = await write(async (transaction) => {
			const row = await IncidentModel.create({
				title: incident.title,
				narrative: incident.narrative,
				service: incident.service,
				engine: engine ?? null,
				severity: incident.severity,
				state: 'resolved',
				origin: 'import',
				startedAt: incident.startedAt,
				resolvedAt: incident.resolvedAt,
				resolution: incident.resolution,
				labels: '[]',
				revision: 1,
				createdAt: at,
				updatedAt: at
			});
			for (const { name, readings } of read) await addReadings(row.number, name, readings, at);
			await incidentChanged(row.number, transaction);
			return row.number;
		});
		numbers.set(incident.id, number);
	}
	return numbers;
}

async function addReadings(
	incidentNumber: number,
	name: string,
	readings: Awaited<ReturnType<typeof readFiles>>[number]['readings'],
	addedAt: string
): Promise<void> {
	const [first] = readings;
	if (first === undefined) return;
	const evidence = await EvidenceModel.create({
		incidentNumber,
		sha256: first.sha256,
		name,
		bytes: first.bytes,
		kind: first.kind === 'unknown' ? 'other' : first.kind,
		format: first.format,
		state: 'read',
		addedAt,
		addedById: null
	});
	for (const [position, reading] of readings.entries()) {
		await ReadingModel.create({ evidenceId: evidence.id, position, body: JSON.stringify(reading) });
	}
}
