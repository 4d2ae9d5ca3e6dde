import type { IncidentFilter, IncidentSort } from '$lib/domain/incident/incident-filter';
import type { Place } from '../api/cursor';
import { select, selectOne, type Replacements } from '../db/query';
import { SUMMARY_COLUMNS, SUMMARY_JOINS, type IncidentRow } from './incident-store';

/** A filter with the person behind `me` put in, and the text taken apart. */
export type ListFilter = Omit<IncidentFilter, 'owner' | 'cursor' | 'q'> & {
	owner: number | 'none' | null;
	/** This incident alone; null: any. */
	number: number | null;
	/** What the full-text index is asked for; null: no words. */
	match: string | null;
};

/** A row of the list with the value that it was sorted by. */
export type ListedRow = IncidentRow & { sortKey: string | number };

const BEGAN = 'COALESCE(i.startedAt, i.detectedAt, i.createdAt)';

/** How each order sorts: by a key, then by number in its own direction, so that ties are settled. */
const ORDERS: Record<
	IncidentSort,
	{ key: string; keyDirection: 'ASC' | 'DESC'; numberDirection: 'ASC' | 'DESC' }
> = {
	'-startedAt': { key: BEGAN, keyDirection: 'DESC', numberDirection: 'DESC' },
	startedAt: { key: BEGAN, keyDirection: 'ASC', numberDirection: 'ASC' },
	severity: { key: 'i.severity', keyDirection: 'ASC', numberDirection: 'DESC' },
	'-severity': { key: 'i.severity', keyDirection: 'DESC', numberDirection: 'DESC' },
	'-updatedAt': { key: 'i.updatedAt', keyDirection: 'DESC', numberDirection: 'DESC' },
	updatedAt: { key: 'i.updatedAt', keyDirection: 'ASC', numberDirection: 'ASC' },
	number: { key: 'i.number', keyDirection: 'ASC', numberDirection: 'ASC' },
	'-number': { key: 'i.number', keyDirection: 'DESC', numberDirection: 'DESC' }
};

interface Conditions {
	sql: string[];
	values: Replacements;
}

/** A condition for each part of the filter that is set; values only as named parameters. */
function toConditions(filter: ListFilter): Conditions {
	const sql: string[] = [];
	const values: Replacements = {};
	const addList = (name: string, column: string, list: readonly (string | number)[]) => {
		if (list.length === 0) return;
		sql.push(`${column} IN (:${name})`);
		values[name] = list;
	};
	addList('states', 'i.state', filter.state);
	addList('severities', 'i.severity', filter.severity);
	addList('services', 'i.service', filter.service);
	addList('engines', 'i.engine', filter.engine);
	if (filter.symptom.length > 0) {
		// Asked of each incident in the list's order, so that a page is full before all were asked.
		sql.push(
			`EXISTS (SELECT 1 FROM incidentSymptoms s
			WHERE s.incidentNumber = i.number AND s.symptomId IN (:symptoms))`
		);
		values['symptoms'] = filter.symptom;
	}
	if (filter.owner === 'none') sql.push('i.ownerId IS NULL');
	else if (filter.owner !== null) {
		sql.push('i.ownerId = :owner');
		values['owner'] = filter.owner;
	}
	if (filter.from !== undefined) {
		sql.push(`${BEGAN} >= :periodStart`);
		values['periodStart'] = filter.from;
	}
	if (filter.to !== undefined) {
		sql.push(`${BEGAN} <= :periodEnd`);
		values['periodEnd'] = filter.to;
	}
	if (filter.number !== null) {
		sql.push('i.number = :number');
		values['number'] = filter.number;
	}
	if (filter.match !== null) {
		sql.push('i.number IN (SELECT t.rowid FROM incidentText t WHERE incidentText MATCH :match)');
		values['match'] = filter.match;
	}
	return { sql, values };
}

function toWhere(conditions: readonly string[]): string {
	return conditions.length === 0 ? '' : `WHERE ${conditions.join(' AND ')}`;
}

/** Rows of one page and one more, which tells whether there is a next one. */
export async function listIncidents(filter: ListFilter, after: Place | null): Promise<ListedRow[]> {
	const order = ORDERS[filter.sort];
	const { sql, values } = toConditions(filter);
	values['pageSize'] = filter.limit + 1;
	if (after !== null) {
		const beyond = order.keyDirection === 'ASC' ? '>' : '<';
		const further = order.numberDirection === 'ASC' ? '>' : '<';
		sql.push(
			`(${order.key} ${beyond} :afterKey OR (${order.key} = :afterKey AND i.number ${further} :afterNumber))`
		);
		values['afterKey'] = after.key;
		values['afterNumber'] = after.id;
	}
	const orderBy = `ORDER BY ${order.key} ${order.keyDirection}, i.number ${order.numberDirection}`;
	// The page's numbers are found first: narratives are long, and sorting would carry them along.
	return select<ListedRow>(
		`SELECT ${SUMMARY_COLUMNS}, ${order.key} AS sortKey FROM incidents i ${SUMMARY_JOINS}
		WHERE i.number IN (SELECT i.number FROM incidents i ${toWhere(sql)} ${orderBy} LIMIT :pageSize)
		${orderBy}`,
		values
	);
}

/** How many incidents the filter leaves. */
export async function countIncidents(filter: ListFilter): Promise<number> {
	const { sql, values } = toConditions(filter);
	const row = await selectOne<{ total: number }>(
		`SELECT COUNT(*) AS total FROM incidents i ${toWhere(sql)}`,
		values
	);
	return row?.total ?? 0;
}
