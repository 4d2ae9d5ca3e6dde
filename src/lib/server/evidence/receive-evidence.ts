import { fail, ok, type Outcome } from '$lib/domain/problem';
import { receiveBody } from './receive-body';
import { receiveUploads } from './receive-uploads';
import type { Upload } from './upload';

const FIELD = 'evidence';

/**
 * Evidence that comes as one raw body, or as files of a multipart request. An empty file is evidence too
 * (its reading says that it is empty); a multipart request without any file is a mistake.
 */
export async function receiveEvidence(event: { request: Request }): Promise<Outcome<Upload[]>> {
	const type = event.request.headers.get('content-type') ?? '';
	if (!/^multipart\//i.test(type)) {
		const upload = await receiveBody(event);
		return upload.ok ? ok([upload.value]) : upload;
	}
	const received = await receiveUploads(event, { field: FIELD });
	if (!received.ok) return received;
	if (received.value.uploads.length > 0) return ok(received.value.uploads);
	const message = `Send at least one file under the name ${FIELD}.`;
	return fail('invalid', message, { errors: [{ field: FIELD, message }] });
}
