import type { Transaction } from 'sequelize';
import type { Actor } from '$lib/domain/person/person';
import { toJson } from '../db/json';
import { AuditModel } from '../db/models/audit';

interface AuditLine {
	at: string;
	actorId: number | null;
	actorName: string;
	via: Actor['via'];
	action: string;
	subject: string;
	detail: Record<string, unknown>;
}

/** Adds a line to the audit trail. */
export async function insertAudit(line: AuditLine, transaction: Transaction): Promise<void> {
	await AuditModel.create({ ...line, detail: toJson(line.detail) }, { transaction });
}
