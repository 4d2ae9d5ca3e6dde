import { createReadStream } from 'node:fs';
import type { Readable } from 'node:stream';
import type { Evidence } from '$lib/domain/incident/incident';
import { can } from '$lib/domain/person/can';
import type { Actor } from '$lib/domain/person/person';
import { fail, ok, type Outcome } from '$lib/domain/problem';
import { record } from '../audit/audit-service';
import { write } from '../db/transaction';
import { insertEntry } from '../incidents/entry-store';
import { hasIncident } from '../incidents/incident-store';
import { incidentChanged } from '../search/indexing';
import { evidencePath, findSize, markPending } from './evidence-files';
import { deleteEvidence, findByBytes, findEvidence, readEvidenceById } from './evidence-store';
import { hintsOf, keepAll, quoteName, settleFiles } from './keep-evidence';
import { keepUploads } from './keep-uploads';
import { holdRaw } from './late-reading';
import { linkEvidence } from './link-runbooks';
import { refreshIncident } from './refresh-incident';
import { removeFromSpool } from './spool';
import type { Upload } from './upload';

function noIncident(number: number): Outcome<never> {
	return fail('not_found', `There is no incident ${number}.`);
}

async function refuseAttaching(
	actor: Actor,
	number: number | null,
	uploads: readonly Upload[]
): Promise<Outcome<never> | null> {
	if (!can(actor, 'evidence.write')) return fail('forbidden', 'Attaching evidence takes a responder.');
	if (number !== null && !(await hasIncident(number))) return noIncident(number);
	if (uploads.length > 0) return null;
	const message = 'Attach at least one file under the name evidence.';
	return fail('invalid', message, { errors: [{ field: 'evidence', message }] });
}

/**
 * Masks, reads and keeps uploads, under an incident or (null) alone. Answers the evidence with its
 * readings, in the order of the uploads; what takes long is answered in state "reading". Bytes that the incident
 * holds already are answered as they are, not kept twice. The spool files are gone afterwards.
 */
export async function attach(
	actor: Actor,
	number: number | null,
	uploads: readonly Upload[]
): Promise<Outcome<Evidence[]>> {
	const refusal = await refuseAttaching(actor, number, uploads);
	if (refusal !== null) {
		await removeFromSpool(uploads.map(({ path }) => path));
		return refusal;
	}
	const now = new Date().toISOString();
	const ids = await keepUploads(uploads, (pending) =>
		write(async (transaction) => {
			const kept = await keepAll({ actor, incidentNumber: number, now, transaction }, pending);
			await holdRaw(kept);
			if (number !== null) {
				await refreshIncident(number, hintsOf(pending), now, transaction);
				await incidentChanged(number, transaction);
			}
			return { value: [...new Set(kept.map(({ evidenceId }) => evidenceId))], kept };
		})
	);
	return ok(await linkEvidence(actor, await readEvidenceById(ids)));
}

/** A stored file on its way out: always as a download, never shown in place. */
export interface OpenedEvidence {
	stream: Readable;
	name: string;
	bytes: number;
	/** Media type; always the one that nothing renders. */
	type: 'application/octet-stream';
}

/** Opens the masked file of that hash. The caller reads or destroys the stream. */
export async function open(actor: Actor, sha256: string): Promise<Outcome<OpenedEvidence>> {
	if (!can(actor, 'evidence.read')) return fail('forbidden', 'Reading evidence takes a reader.');
	const row = await findByBytes(sha256);
	const bytes = row === null ? null : await findSize(sha256);
	if (row === null || bytes === null) return fail('not_found', 'There is no evidence of that hash.');
	return ok({
		stream: createReadStream(evidencePath(sha256)),
		name: row.name,
		bytes,
		type: 'application/octet-stream'
	});
}

/** Removes a piece of evidence with its readings; a line in log and audit says so. The file goes with its last row. */
export async function remove(actor: Actor, number: number, id: number): Promise<Outcome<null>> {
	if (!can(actor, 'evidence.remove')) return fail('forbidden', 'Removing evidence takes a curator.');
	if (!(await hasIncident(number))) return noIncident(number);
	const now = new Date().toISOString();
	const removed = await write(async (transaction) => {
		const row = await findEvidence(number, id);
		if (row === null) return null;
		if (row.sha256 !== '') await markPending(row.sha256);
		await deleteEvidence(id, transaction);
		await insertEntry(
			{
				incidentNumber: number,
				at: now,
				text: `Removed the evidence ${quoteName(row.name)}.`,
				authorId: actor.personId,
				kind: 'evidence',
				createdAt: now
			},
			transaction
		);
		await record(
			actor,
			'evidence.remove',
			`evidence:${id}`,
			{ incident: number, name: row.name, sha256: row.sha256 },
			transaction
		);
		await refreshIncident(number, [], now, transaction);
		await incidentChanged(number, transaction);
		return row;
	});
	if (removed === null) return fail('not_found', `Incident ${number} has no evidence ${id}.`);
	if (removed.sha256 !== '') await settleFiles([removed.sha256]);
	return ok(null);
}
