import type { Transaction } from 'sequelize';
import type { AuditFilter } from '$lib/domain/audit/audit-query';
import type { AuditLine } from '$lib/domain/audit/audit-line';
import type { Actor } from '$lib/domain/person/person';
import { fromJson, toJson } from '../db/json';
import { AuditModel } from '../db/models/audit';
import { select, selectOne, type Replacements } from '../db/query';

interface NewLine {
	at: string;
	actorId: number | null;
	actorName: string;
	via: Actor['via'];
	action: string;
	subject: string;
	detail: Record<string, unknown>;
}

type Row = Omit<NewLine, 'detail'> & { id: number; detail: string };

/** Adds a line to the audit trail. */
export async function insertAudit(line: NewLine, transaction: Transaction): Promise<void> {
	await AuditModel.create({ ...line, detail: toJson(line.detail) }, { transaction });
}

/** The character behind `.` and `:` in ASCII ends the range of what begins with them: an index can look it up. */
function toConditions(filter: AuditFilter): { sql: string[]; values: Replacements } {
	const sql: string[] = [];
	const values: Replacements = {};
	const add = (condition: string, given: Replacements) => {
		sql.push(condition);
		Object.assign(values, given);
	};
	if (filter.person === 'system') add('actorId IS NULL', {});
	else if (filter.person !== undefined) add('actorId = :person', { person: filter.person });
	if (filter.action?.includes('.')) add('action = :action', { action: filter.action });
	else if (filter.action !== undefined)
		add('action > :group AND action < :groupEnd', {
			group: `${filter.action}.`,
			groupEnd: `${filter.action}/`
		});
	if (filter.subject?.includes(':')) add('subject = :subject', { subject: filter.subject });
	else if (filter.subject !== undefined)
		add('subject > :kind AND subject < :kindEnd', {
			kind: `${filter.subject}:`,
			kindEnd: `${filter.subject};`
		});
	if (filter.from !== undefined) add('at >= :periodStart', { periodStart: filter.from });
	if (filter.to !== undefined) add('at <= :periodEnd', { periodEnd: filter.to });
	return { sql, values };
}

function toWhere(sql: readonly string[]): string {
	return sql.length === 0 ? '' : `WHERE ${sql.join(' AND ')}`;
}

function toLine({ actorId, actorName, detail, ...row }: Row): AuditLine {
	return {
		...row,
		actor: actorId === null ? null : { id: actorId, name: actorName },
		actorName,
		detail: fromJson<Record<string, unknown>>(detail)
	};
}

/** Lines that the filter leaves, newest first, from before an id (null: from the newest). */
export async function listLines(
	filter: AuditFilter,
	beforeId: number | null,
	limit: number
): Promise<AuditLine[]> {
	const { sql, values } = toConditions(filter);
	if (beforeId !== null) sql.push('id < :beforeId');
	const rows = await select<Row>(`SELECT * FROM audit ${toWhere(sql)} ORDER BY id DESC LIMIT :limit`, {
		...values,
		beforeId,
		limit
	});
	return rows.map(toLine);
}

/** How many lines the filter leaves. */
export async function countLines(filter: AuditFilter): Promise<number> {
	const { sql, values } = toConditions(filter);
	const row = await selectOne<{ total: number }>(
		`SELECT COUNT(*) AS total FROM audit ${toWhere(sql)}`,
		values
	);
	return row?.total ?? 0;
}

/** Every action that stands in the trail, by name. */
export async function listActions(): Promise<string[]> {
	// The first behind the one before, each from the index: a DISTINCT would read all lines.
	const rows = await select<{ action: string }>(
		`WITH RECURSIVE actions(action) AS (
			SELECT MIN(action) FROM audit
			UNION ALL
			SELECT (SELECT MIN(a.action) FROM audit a WHERE a.action > actions.action) FROM actions
			WHERE actions.action IS NOT NULL
		) SELECT action FROM actions WHERE action IS NOT NULL`
	);
	return rows.map(({ action }) => action);
}
