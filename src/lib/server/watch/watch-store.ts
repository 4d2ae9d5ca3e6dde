import type { IncidentState, Severity } from '$lib/domain/incident/incident';
import type { OperatorKind } from '$lib/domain/reading/operator';
import { select, selectOne } from '../db/query';

/** An incident as it stands in its table, with the name of whoever is on it. */
export interface IncidentRow {
	number: number;
	title: string;
	service: string | null;
	engine: string | null;
	engineVersion: string | null;
	severity: Severity;
	state: IncidentState;
	revision: number;
	ownerId: number | null;
	ownerName: string | null;
	since: string;
	containedAt: string | null;
	hasEvidence: number;
	/** Published runbooks that serve one of its symptoms on its engine. */
	runbooks: number;
}

const COLUMNS = `i.number, i.title, i.service, i.engine, i.engineVersion, i.severity, i.state, i.revision,
	i.ownerId, p.name AS ownerName, i.containedAt,
	coalesce(i.detectedAt, i.startedAt, i.createdAt) AS since,
	EXISTS (SELECT 1 FROM evidence e WHERE e.incidentNumber = i.number) AS hasEvidence,
	(SELECT count(*) FROM runbooks r
		JOIN runbookRevisions v ON v.runbookId = r.id AND v.revision = r.publishedRevision
		WHERE r.state = 'published'
			AND (i.engine IS NULL OR i.engine = 'unknown'
				OR EXISTS (SELECT 1 FROM json_each(v.engines) WHERE value = i.engine))
			AND EXISTS (SELECT 1 FROM json_each(v.symptoms) s
				JOIN incidentSymptoms n ON n.symptomId = s.value AND n.incidentNumber = i.number)) AS runbooks`;

/** Which incidents: all that are open, or those contained whose cause nobody has named. */
const WHICH = {
	open: `i.state = 'open' AND i.mergedInto IS NULL`,
	containedWithoutCause: `i.state = 'contained' AND i.mergedInto IS NULL AND coalesce(trim(i.cause), '') = ''`
};

/** Those without an owner first, then by severity, then the oldest; at most `limit`. */
export async function findIncidents(which: keyof typeof WHICH, limit: number): Promise<IncidentRow[]> {
	return select<IncidentRow>(
		`SELECT ${COLUMNS} FROM incidents i LEFT JOIN people p ON p.id = i.ownerId
		WHERE ${WHICH[which]}
		ORDER BY i.ownerId IS NOT NULL, i.severity, since, i.number LIMIT :limit`,
		{ limit }
	);
}

/** How many incidents there are: open, contained without a cause, and in all. */
export async function countIncidents(): Promise<{ open: number; contained: number; all: number }> {
	const row = await selectOne<{ open: number; contained: number; all: number }>(
		`SELECT
			(SELECT count(*) FROM incidents i WHERE ${WHICH.open}) AS open,
			(SELECT count(*) FROM incidents i WHERE ${WHICH.containedWithoutCause}) AS contained,
			(SELECT count(*) FROM incidents) AS "all"`
	);
	return row ?? { open: 0, contained: 0, all: 0 };
}

/** What one reading says of temporary files; figures that it does not hold are null. */
export interface SpillRow {
	incident: number;
	/** Temporary files and their bytes, from a log. */
	files: number | null;
	logBytes: number | null;
	/** Bytes that the plan's operators wrote. */
	planBytes: number | null;
	/** The operator of the heaviest spill, where the plan shows one. */
	kind: OperatorKind | null;
	name: string | null;
	relation: string | null;
	alias: string | null;
	condition: string | null;
}

/**
 * The spills in the readings of these incidents. Drawn out by SQLite, off the event loop: a plan of some
 * thousand operators is a text of megabytes, and four words of it are wanted.
 */
export async function findSpills(incidents: readonly number[]): Promise<SpillRow[]> {
	if (incidents.length === 0) return [];
	return select<SpillRow>(
		`WITH spilled AS MATERIALIZED (
			SELECT e.incidentNumber AS incident, r.body AS body,
				-- The trail ends at the join; the symptom of a hash stands at its table.
				coalesce(json_extract(r.body, '$.trails[0].overflow'),
					(SELECT json_extract(s.value, '$.operator') FROM json_each(r.body, '$.symptoms') s
						WHERE json_extract(s.value, '$.id') LIKE '%-spill'
							AND json_extract(s.value, '$.operator') IS NOT NULL
						ORDER BY s.key LIMIT 1)) AS path
			FROM readings r JOIN evidence e ON e.id = r.evidenceId
			WHERE e.incidentNumber IN (:incidents)
		), placed AS (
			-- An operator's path "0.1.0" is the JSON path $.plan.root.children[1].children[0].
			SELECT incident, body, '$.plan.root' || CASE WHEN length(path) < 2 THEN '' ELSE
				substr(replace(substr(path, 2), '.', '].children['), 2) || ']' END AS at
			FROM spilled
		)
		SELECT incident,
			json_extract(body, '$.spills.files') AS files,
			json_extract(body, '$.spills.bytes') AS logBytes,
			(SELECT sum(value) FROM json_tree(body, '$.plan.root') WHERE key = 'temporaryBytes') AS planBytes,
			json_extract(body, at || '.kind') AS kind,
			json_extract(body, at || '.name') AS name,
			json_extract(body, at || '.relation') AS relation,
			json_extract(body, at || '.alias') AS alias,
			json_extract(body, at || '.condition') AS condition
		FROM placed`,
		{ incidents: [...incidents] }
	);
}

/** An attempt without an outcome, with what tells how far it has come. */
export interface AttemptRow {
	id: number;
	incident: number;
	incidentTitle: string;
	runbook: string | null;
	title: string;
	byId: number | null;
	byName: string | null;
	startedAt: string;
	/** The first step that is neither ticked nor skipped; null: none is left, or it follows no runbook. */
	step: number | null;
	/** Steps in all; 0: it follows no runbook. */
	of: number;
}

/** Attempts that nobody has ended, the latest first; at most `limit`. */
export async function findAttemptsUnderWay(limit: number): Promise<AttemptRow[]> {
	return select<AttemptRow>(
		`SELECT a.id, a.incidentNumber AS incident, i.title AS incidentTitle, a.runbookSlug AS runbook, a.title,
			a.byId, p.name AS byName, a.startedAt,
			(SELECT min(s.number) FROM attemptSteps s
				WHERE s.attemptId = a.id AND s.tickedAt IS NULL AND s.skipped IS NULL) AS step,
			(SELECT count(*) FROM attemptSteps s WHERE s.attemptId = a.id) AS of
		FROM attempts a JOIN incidents i ON i.number = a.incidentNumber
		LEFT JOIN people p ON p.id = a.byId
		WHERE a.endedAt IS NULL AND a.outcome IS NULL AND i.state IN ('open', 'contained')
		ORDER BY a.startedAt DESC, a.id DESC LIMIT :limit`,
		{ limit }
	);
}

export interface ReviewRow {
	slug: string;
	title: string;
	reviewDue: string;
	ownerId: number | null;
	ownerName: string | null;
}

/** Published runbooks whose review is due by then, the most overdue first; at most `limit`. */
export async function findReviewsDue(by: string, limit: number): Promise<ReviewRow[]> {
	return select<ReviewRow>(
		`SELECT r.slug, v.title, r.reviewDue, r.ownerId, p.name AS ownerName
		FROM runbooks r JOIN runbookRevisions v ON v.runbookId = r.id AND v.revision = r.publishedRevision
		LEFT JOIN people p ON p.id = r.ownerId
		WHERE r.state = 'published' AND r.reviewDue IS NOT NULL AND r.reviewDue <= :by
		ORDER BY r.reviewDue, r.slug LIMIT :limit`,
		{ by, limit }
	);
}

/** What each log read since then says, at the time of its incident, else when it was added. */
export async function findLogSpills(since: string): Promise<{ at: string; temporaryBytes: number }[]> {
	return select<{ at: string; temporaryBytes: number }>(
		`SELECT coalesce(i.startedAt, i.detectedAt, e.addedAt) AS at,
			json_extract(r.body, '$.spills.bytes') AS temporaryBytes
		FROM evidence e JOIN readings r ON r.evidenceId = e.id
		LEFT JOIN incidents i ON i.number = e.incidentNumber
		WHERE e.kind = 'log' AND e.state = 'read'
			AND coalesce(i.startedAt, i.detectedAt, e.addedAt) >= :since
			AND json_extract(r.body, '$.spills.bytes') IS NOT NULL`,
		{ since }
	);
}

export interface WorkedRow {
	attempt: number;
	incident: number;
	incidentTitle: string;
	runbook: string | null;
	title: string;
	endedAt: string;
}

/** The latest attempts that worked; at most `limit`. */
export async function findWorked(limit: number): Promise<WorkedRow[]> {
	return select<WorkedRow>(
		`SELECT a.id AS attempt, a.incidentNumber AS incident, i.title AS incidentTitle,
			a.runbookSlug AS runbook, a.title, coalesce(a.endedAt, a.startedAt) AS endedAt
		FROM attempts a JOIN incidents i ON i.number = a.incidentNumber
		WHERE a.outcome = 'worked' ORDER BY endedAt DESC, a.id DESC LIMIT :limit`,
		{ limit }
	);
}
