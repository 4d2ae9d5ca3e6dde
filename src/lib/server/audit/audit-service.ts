import type { AuditFilter, AuditQuery } from '$lib/domain/audit/audit-query';
import type { AuditLine } from '$lib/domain/audit/audit-line';
import type { Page } from '$lib/domain/page';
import { can } from '$lib/domain/person/can';
import type { Actor } from '$lib/domain/person/person';
import { fail, ok, type Outcome } from '$lib/domain/problem';
import { writeCsvRecord } from '$lib/domain/table/csv';
import { cutPage, readCursor } from '../api/cursor';
import type { Transaction } from '../db/transaction';
import * as store from './audit-store';

const LIST = 'audit';
const CSV_HEAD = ['number', 'at', 'person', 'name', 'via', 'action', 'subject', 'detail'];
/** Lines that are read at once for a file: its length is no matter of memory. */
const CSV_LINES = 1000;

/**
 * Notes who did what, in the transaction that does it: an action without its line doesn't happen. `action`
 * is `incident.create`, `subject` is `incident:412`. Never a secret in `detail`.
 */
export function record(
	actor: Actor,
	action: string,
	subject: string,
	detail: Record<string, unknown>,
	transaction: Transaction
): Promise<void> {
	return store.insertAudit(
		{
			at: new Date().toISOString(),
			actorId: actor.personId,
			actorName: actor.name,
			via: actor.via,
			action,
			subject,
			detail
		},
		transaction
	);
}

function notAllowed() {
	return fail('forbidden', 'Only an administrator reads the audit trail.');
}

/** A page of the trail, newest first. */
export async function list(actor: Actor, query: AuditQuery): Promise<Outcome<Page<AuditLine>>> {
	if (!can(actor, 'audit.read')) return notAllowed();
	const after = readCursor(LIST, query.cursor);
	if (!after.ok) return after;
	const [found, total] = await Promise.all([
		store.listLines(query, after.value?.id ?? null, query.limit + 1),
		store.countLines(query)
	]);
	const { rows, next } = cutPage(found, query.limit, LIST, ({ id }) => ({ key: id, id }));
	return ok({ items: rows, next, total });
}

/** Every action that stands in the trail, for a filter to offer. */
export async function listActions(actor: Actor): Promise<Outcome<string[]>> {
	if (!can(actor, 'audit.read')) return notAllowed();
	return ok(await store.listActions());
}

async function* writeLines(filter: AuditFilter): AsyncGenerator<string> {
	yield writeCsvRecord(CSV_HEAD);
	let beforeId: number | null = null;
	for (;;) {
		const lines: AuditLine[] = await store.listLines(filter, beforeId, CSV_LINES);
		if (lines.length === 0) return;
		yield lines
			.map(({ id, at, actor, actorName, via, action, subject, detail }) =>
				writeCsvRecord([id, at, actor?.id ?? null, actorName, via, action, subject, JSON.stringify(detail)])
			)
			.join('');
		beforeId = lines.at(-1)?.id ?? null;
	}
}

/** The lines that a filter leaves as CSV, newest first, piece by piece. */
export function exportCsv(actor: Actor, filter: AuditFilter): Outcome<AsyncGenerator<string>> {
	return can(actor, 'audit.read') ? ok(writeLines(filter)) : notAllowed();
}
