import type { Actor } from '$lib/domain/person/person';
import type { LogHints } from '$lib/domain/reading/reading';
import { ENGINE_NAMES } from '$lib/domain/reading/engine-names';
import { wordOf } from '$lib/domain/symptom/id-words';
import type { SymptomId } from '$lib/domain/symptom/symptom';
import { record } from '../audit/audit-service';
import { write, type Transaction } from '../db/transaction';
import { insertEntry } from '../incidents/entry-store';
import { clearPending, listPending, placeFile, removeFile } from './evidence-files';
import {
	deleteEvidence,
	findByBytes,
	findSameBytes,
	insertEvidence,
	replaceReadings,
	updateEvidence,
	type EvidenceRow
} from './evidence-store';
import type { PendingUpload, ReadUpload } from './read-upload';

/** What keeping one upload came to. */
export interface Kept {
	evidenceId: number;
	pending: PendingUpload;
	/** Its reading had not ended when the row was written: it goes on and is put into the row later. */
	late: boolean;
}

/** Who keeps something, when, and where. */
export interface KeepContext {
	actor: Actor;
	/** null: it stands alone until an incident claims it. */
	incidentNumber: number | null;
	now: string;
	transaction: Transaction;
}

/** A file name as Markdown shows it unchanged. */
export function quoteName(name: string): string {
	return `\`${name.replaceAll('`', "'")}\``;
}

/** What was read, for the log: "a PostgreSQL plan: hash spill, sort spill". */
function summarize(read: ReadUpload): string {
	if (read.kind === 'picture') return 'a picture';
	const first = read.readings.find(({ kind }) => kind !== 'unknown');
	if (first === undefined) return 'not recognised';
	const what = ['a', ENGINE_NAMES[first.engine], first.kind].filter((word) => word !== null).join(' ');
	const symptoms = [
		...new Set<SymptomId>(read.readings.flatMap(({ symptoms }) => symptoms.map(({ id }) => id)))
	];
	return symptoms.length === 0 ? what : `${what}: ${symptoms.map(wordOf).join(', ')}`;
}

async function logIt(context: KeepContext, text: string): Promise<void> {
	if (context.incidentNumber === null) return;
	await insertEntry(
		{
			incidentNumber: context.incidentNumber,
			at: context.now,
			text,
			authorId: context.actor.personId,
			kind: 'evidence',
			createdAt: context.now
		},
		context.transaction
	);
}

async function recordIt(
	context: KeepContext,
	action: string,
	evidenceId: number,
	detail: object
): Promise<void> {
	await record(
		context.actor,
		action,
		`evidence:${evidenceId}`,
		{ incident: context.incidentNumber, ...detail },
		context.transaction
	);
}

/** The same bytes in this incident; or, claimed for it now, those that stand alone. */
async function claimSameBytes(context: KeepContext, sha256: string): Promise<EvidenceRow | null> {
	const here = await findSameBytes(context.incidentNumber, sha256);
	if (here !== null || context.incidentNumber === null) return here;
	const alone = await findSameBytes(null, sha256);
	if (alone === null) return null;
	await updateEvidence(alone.id, { incidentNumber: context.incidentNumber }, context.transaction);
	await logIt(context, `Attached ${quoteName(alone.name)}, which stood alone until now.`);
	await recordIt(context, 'evidence.claim', alone.id, { name: alone.name, sha256 });
	return alone;
}

async function keepRead(context: KeepContext, pending: PendingUpload, read: ReadUpload): Promise<Kept> {
	const same = await claimSameBytes(context, read.sha256);
	if (same !== null) return { evidenceId: same.id, pending, late: false };
	await placeFile(read.maskedPath, read.sha256);
	const { name } = pending.upload;
	const evidenceId = await insertEvidence(
		{
			incidentNumber: context.incidentNumber,
			sha256: read.sha256,
			name,
			bytes: read.bytes,
			kind: read.kind,
			format: read.format,
			state: 'read',
			addedAt: context.now,
			addedById: context.actor.personId
		},
		context.transaction
	);
	await replaceReadings(evidenceId, read.readings, context.transaction);
	await logIt(context, `Attached ${quoteName(name)}, ${summarize(read)}.`);
	await recordIt(context, 'evidence.attach', evidenceId, { name, sha256: read.sha256 });
	return { evidenceId, pending, late: false };
}

async function keepUnread(context: KeepContext, pending: PendingUpload): Promise<Kept> {
	const { name, bytes } = pending.upload;
	const evidenceId = await insertEvidence(
		{
			incidentNumber: context.incidentNumber,
			// Not known before the last byte is masked.
			sha256: '',
			name,
			bytes,
			kind: 'other',
			format: 'unknown',
			state: 'reading',
			addedAt: context.now,
			addedById: context.actor.personId
		},
		context.transaction
	);
	await logIt(context, `Attached ${quoteName(name)}, which is still being read.`);
	await recordIt(context, 'evidence.attach', evidenceId, { name });
	return { evidenceId, pending, late: true };
}

/** Writes rows, readings, log and audit of all uploads; those not read yet are kept as being read. */
export async function keepAll(context: KeepContext, uploads: readonly PendingUpload[]): Promise<Kept[]> {
	const kept: Kept[] = [];
	for (const pending of uploads)
		kept.push(
			pending.done === null
				? await keepUnread(context, pending)
				: await keepRead(context, pending, pending.done)
		);
	return kept;
}

/** What the logs among the uploads say of the setting. */
export function hintsOf(uploads: readonly PendingUpload[]): LogHints[] {
	return uploads.flatMap(({ done }) => done?.hints ?? []);
}

/**
 * Settles the files whose rows were about to come or go: a file that no row names is removed. Runs in the
 * writers' queue, where no other writer can be placing the same bytes.
 */
export async function settleFiles(hashes?: readonly string[]): Promise<void> {
	await write(async () => {
		for (const sha256 of hashes ?? (await listPending())) {
			if ((await findByBytes(sha256)) === null) await removeFile(sha256);
			await clearPending(sha256);
		}
	});
}

/** The hashes that keeping these uploads may have placed. */
export function hashesOf(uploads: readonly PendingUpload[]): string[] {
	return uploads.flatMap(({ done }) => done?.sha256 ?? []);
}

/** Puts a reading that came late into its row; the row goes where the same bytes are there already. */
export async function keepLate(context: KeepContext, row: EvidenceRow, read: ReadUpload): Promise<void> {
	const same = await findSameBytes(row.incidentNumber, read.sha256, row.id);
	if (same !== null) {
		await deleteEvidence(row.id, context.transaction);
		await logIt(
			context,
			`${quoteName(row.name)} holds the same as ${quoteName(same.name)}: it is kept once.`
		);
		return;
	}
	await placeFile(read.maskedPath, read.sha256);
	await updateEvidence(
		row.id,
		{ sha256: read.sha256, bytes: read.bytes, kind: read.kind, format: read.format, state: 'read' },
		context.transaction
	);
	await replaceReadings(row.id, read.readings, context.transaction);
	await logIt(context, `Read ${quoteName(row.name)} to its end: ${summarize(read)}.`);
}
