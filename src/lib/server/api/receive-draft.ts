import type { RequestEvent } from '@sveltejs/kit';
import { draftInput, type DraftInput } from '$lib/domain/precedent/precedent-input';
import { ok, type Outcome } from '$lib/domain/problem';
import { receiveUploads } from '../evidence/receive-uploads';
import { removeFromSpool } from '../evidence/spool';
import type { Upload } from '../evidence/upload';
import { readJson } from '../http/api';
import { toFields, validate } from '../http/fields';

/** What precedents are asked for: fields and evidence of a multipart request, or fields alone as JSON. */
export async function receiveDraft(
	event: RequestEvent
): Promise<Outcome<{ draft: DraftInput; uploads: Upload[] }>> {
	if (!/^multipart\//i.test(event.request.headers.get('content-type') ?? '')) {
		const draft = await readJson(event, draftInput);
		return draft.ok ? ok({ draft: draft.value, uploads: [] }) : draft;
	}
	const received = await receiveUploads(event, { field: 'evidence' });
	if (!received.ok) return received;
	const { fields, uploads } = received.value;
	const given = toFields(draftInput.shape, (name) => (fields[name] === undefined ? [] : [fields[name]]));
	const draft = validate(draftInput, given);
	if (draft.ok) return ok({ draft: draft.value, uploads });
	await removeFromSpool(uploads.map((upload) => upload.path));
	return draft;
}
