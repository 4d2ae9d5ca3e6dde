import type { SymptomCounts } from '$lib/domain/symptom/symptom-page';
import type { SymptomId } from '$lib/domain/symptom/symptom';
import { select } from '../db/query';

const BEGAN = 'coalesce(i.startedAt, i.detectedAt, i.createdAt)';

/** How often each symptom was met; a symptom never met is left out. Merged incidents count with their heir. */
export async function countSymptoms(): Promise<Map<SymptomId, SymptomCounts>> {
	const rows = await select<SymptomCounts & { symptomId: SymptomId }>(
		`SELECT s.symptomId, count(*) AS incidents, sum(i.state IN ('open', 'contained')) AS open, max(${BEGAN}) AS lastAt
		FROM incidentSymptoms s JOIN incidents i ON i.number = s.incidentNumber
		WHERE i.mergedInto IS NULL GROUP BY s.symptomId`
	);
	return new Map(rows.map(({ symptomId, ...counts }) => [symptomId, counts]));
}

/** How many incidents with a symptom began in each month from a time on; months without any are left out. */
export async function countMonths(symptom: SymptomId, from: string): Promise<Map<string, number>> {
	const rows = await select<{ month: string; incidents: number }>(
		`SELECT substr(${BEGAN}, 1, 7) AS month, count(*) AS incidents
		FROM incidentSymptoms s JOIN incidents i ON i.number = s.incidentNumber
		WHERE s.symptomId = :symptom AND i.mergedInto IS NULL AND ${BEGAN} >= :from GROUP BY 1`,
		{ symptom, from }
	);
	return new Map(rows.map(({ month, incidents }) => [month, incidents]));
}

/** How many published runbooks serve each symptom; one without any is left out. */
export async function countRunbooks(): Promise<Map<SymptomId, number>> {
	const rows = await select<{ symptomId: SymptomId; runbooks: number }>(
		`SELECT e.value AS symptomId, count(*) AS runbooks
		FROM runbooks b JOIN runbookRevisions r ON r.runbookId = b.id AND r.revision = coalesce(b.publishedRevision, b.revision),
			json_each(r.symptoms) e
		WHERE b.state = 'published' GROUP BY e.value`
	);
	return new Map(rows.map(({ symptomId, runbooks }) => [symptomId, runbooks]));
}
