import { select, selectOne } from '../db/query';

/** A file whose time is up. */
export interface DueFile {
	id: number;
	incidentNumber: number;
	name: string;
	sha256: string;
}

/** Resolved before the moment and reviewed; a file that was added later has its own time. */
const DUE = `FROM evidence e JOIN incidents i ON i.number = e.incidentNumber
	WHERE i.state = 'reviewed' AND e.state = 'read' AND e.sha256 <> ''
	AND COALESCE(i.resolvedAt, i.updatedAt) < :moment AND e.addedAt < :moment`;

/** Files of incidents that were reviewed, resolved before a moment, by id. */
export function listDueFiles(moment: string, limit: number): Promise<DueFile[]> {
	return select<DueFile>(
		`SELECT e.id, e.incidentNumber, e.name, e.sha256 ${DUE} ORDER BY e.id LIMIT :limit`,
		{ moment, limit }
	);
}

/** How many they are. */
export async function countDueFiles(moment: string): Promise<number> {
	const row = await selectOne<{ total: number }>(`SELECT COUNT(*) AS total ${DUE}`, { moment });
	return row?.total ?? 0;
}
