import { incidentInput, type IncidentInput } from '$lib/domain/incident/incident-input';
import { fail, ok, type Outcome } from '$lib/domain/problem';
import { receiveUploads } from '../evidence/receive-uploads';
import { removeFromSpool } from '../evidence/spool';
import type { Upload } from '../evidence/upload';
import { parseJson, readJson } from '../http/api';
import { validate } from '../http/fields';

const PART = 'incident';

function readPart(text: string | undefined): Outcome<IncidentInput> {
	if (text === undefined) {
		const message = `Send the incident as JSON in the part ${PART}.`;
		return fail('invalid', message, { errors: [{ field: PART, message }] });
	}
	const value = parseJson(text);
	return value.ok ? validate(incidentInput, value.value) : value;
}

/**
 * An incident as JSON, or as multipart: the part `incident` (that JSON, as a field or as a file) and files
 * under `evidence`. Fields that an incident doesn't have are ignored. Nothing is left in the spool where it is
 * refused.
 */
export async function receiveIncident(event: {
	request: Request;
}): Promise<Outcome<{ input: IncidentInput; uploads: Upload[] }>> {
	const type = event.request.headers.get('content-type') ?? '';
	if (!/^multipart\//i.test(type)) {
		const input = await readJson(event, incidentInput);
		return input.ok ? ok({ input: input.value, uploads: [] }) : input;
	}
	const received = await receiveUploads(event, { field: 'evidence', documents: [PART] });
	if (!received.ok) return received;
	const { uploads, fields } = received.value;
	const input = readPart(fields[PART]);
	if (input.ok) return ok({ input: input.value, uploads });
	await removeFromSpool(uploads.map(({ path }) => path));
	return input;
}
