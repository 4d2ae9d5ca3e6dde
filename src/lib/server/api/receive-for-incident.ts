import { z } from 'zod';
import { ok, type Outcome } from '$lib/domain/problem';
import { receiveUploads } from '../evidence/receive-uploads';
import { removeFromSpool } from '../evidence/spool';
import type { Upload } from '../evidence/upload';
import { validate } from '../http/fields';

/** The fields that may come beside the files of `POST /evidence`. */
export const evidenceFields = z.object({
	/** The incident that claims it; left out (or empty): none yet. */
	incident: z
		.string()
		.regex(/^([1-9]\d{0,14})?$/, "Give an incident's number, or leave it out.")
		.transform((text) => (text === '' ? null : Number(text)))
		.optional()
});

/** Files, and the number of the incident that they belong to where one is named. */
export async function receiveForIncident(event: {
	request: Request;
}): Promise<Outcome<{ incident: number | null; uploads: Upload[] }>> {
	const received = await receiveUploads(event, { field: 'evidence' });
	if (!received.ok) return received;
	const { uploads } = received.value;
	const fields = validate(evidenceFields, received.value.fields);
	if (fields.ok) return ok({ incident: fields.value.incident ?? null, uploads });
	await removeFromSpool(uploads.map(({ path }) => path));
	return fields;
}
