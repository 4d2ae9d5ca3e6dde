import type { AttemptOutcome } from '$lib/domain/incident/attempt';
import type { Person } from '$lib/domain/person/person';
import { select } from '../db/query';

/** A try of a runbook as its page lists it. */
export interface RunbookAttempt {
	id: number;
	incident: number;
	incidentTitle: string;
	startedAt: string;
	by: Person | null;
	/** null: under way. */
	outcome: AttemptOutcome | null;
	note: string | null;
}

/** The page of a runbook shows this many of its attempts. */
const MOST_ATTEMPTS = 50;

/** Where a runbook was tried, the latest first. */
export async function listRunbookAttempts(slug: string): Promise<RunbookAttempt[]> {
	const rows = await select<Omit<RunbookAttempt, 'by'> & { byId: number | null; byName: string | null }>(
		`SELECT a.id, a.incidentNumber AS incident, i.title AS incidentTitle, a.startedAt, a.byId, p.name AS byName,
			a.outcome, a.note
		FROM attempts a JOIN incidents i ON i.number = a.incidentNumber LEFT JOIN people p ON p.id = a.byId
		WHERE a.runbookSlug = :slug ORDER BY a.startedAt DESC, a.id DESC LIMIT :most`,
		{ slug, most: MOST_ATTEMPTS }
	);
	return rows.map(({ byId, byName, ...attempt }) => ({
		...attempt,
		by: byId === null ? null : { id: byId, name: byName ?? '' }
	}));
}
