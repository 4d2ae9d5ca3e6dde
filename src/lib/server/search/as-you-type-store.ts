import { fromJson } from '$lib/server/db/json';
import { select } from '$lib/server/db/query';
import type { ShortDocument } from './as-you-type';

/** Incidents above a number, lowest first, with their short fields. */
export async function listIncidentShorts(above: number, limit: number): Promise<ShortDocument[]> {
	const rows = await select<{
		number: number;
		title: string;
		place: string;
		symptoms: string | null;
		owner: string | null;
	}>(
		`SELECT i.number, i.title, concat_ws(' ', i.service, i.database, i.engine) AS place, p.name AS owner,
			(SELECT group_concat(s.symptomId, ' ') FROM incidentSymptoms s WHERE s.incidentNumber = i.number) AS symptoms
		FROM incidents i LEFT JOIN people p ON p.id = i.ownerId
		WHERE i.number > :above ORDER BY i.number LIMIT :limit`,
		{ above, limit }
	);
	return rows.map((row) => ({
		id: `incident:${row.number}`,
		kind: 'incident',
		key: String(row.number),
		title: row.title,
		place: row.place,
		symptoms: row.symptoms ?? '',
		people: row.owner ?? ''
	}));
}

/** All runbooks with their short fields. */
export async function listRunbookShorts(): Promise<ShortDocument[]> {
	const rows = await select<{
		slug: string;
		title: string;
		engines: string;
		symptoms: string;
		owner: string | null;
	}>(
		`SELECT b.slug, r.title, r.engines, r.symptoms, p.name AS owner
		FROM runbooks b JOIN runbookRevisions r ON r.runbookId = b.id AND r.revision = coalesce(b.publishedRevision, b.revision)
		LEFT JOIN people p ON p.id = b.ownerId ORDER BY b.id`
	);
	return rows.map((row) => ({
		id: `runbook:${row.slug}`,
		kind: 'runbook',
		key: row.slug,
		title: row.title,
		place: fromJson<string[]>(row.engines).join(' '),
		symptoms: fromJson<string[]>(row.symptoms).join(' '),
		people: row.owner ?? ''
	}));
}
