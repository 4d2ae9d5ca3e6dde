import { runAll, type Migration } from './migration';

/** Written as the list's own order is (incident-list-store.ts): SQLite takes an index only for the same expression. */
const BEGAN = 'COALESCE(startedAt, detectedAt, createdAt)';

/**
 * Orders and periods of the list of incidents without reading every narrative. The first index on startedAt alone
 * served no order: an incident whose start isn't known is listed by when it was noticed.
 */
export const incidentLists: Migration = {
	name: '0003-incident-lists',
	up: (context) =>
		runAll(context, [
			'DROP INDEX incidentsByStart',
			`CREATE INDEX incidentsByBegin ON incidents(${BEGAN}, number)`,
			'CREATE INDEX incidentsBySeverity ON incidents(severity, number)',
			// The last narrow one: counting and filtering by engine looks at no row.
			'CREATE INDEX incidentsByEngine ON incidents(engine)'
		]),
	down: (context) =>
		runAll(context, [
			'DROP INDEX incidentsByEngine',
			'DROP INDEX incidentsBySeverity',
			'DROP INDEX incidentsByBegin',
			'CREATE INDEX incidentsByStart ON incidents(startedAt, number)'
		])
};
