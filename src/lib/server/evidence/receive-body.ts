import { createHash } from 'node:crypto';
import { createWriteStream } from 'node:fs';
import { Readable } from 'node:stream';
import { pipeline } from 'node:stream/promises';
import { fail, ok, type Outcome } from '$lib/domain/problem';
import { BodyTooLarge, readLimited, refuseOversized, refuseTooLarge } from './body-limit';
import { isStorageFault, makeSpoolPath, PRIVATE_FILE, removeFromSpool } from './spool';
import type { Upload } from './upload';

/** Media types of a body that is one piece of evidence, and what it is called where it has no name. */
const NAMES: Record<string, string> = {
	'text/plain': 'evidence.txt',
	'application/json': 'evidence.json',
	'application/xml': 'evidence.xml',
	'application/octet-stream': 'evidence'
};

/** Receives a raw body of one of four media types into the spool; an empty one is an empty file. */
export async function receiveBody(event: { request: Request }): Promise<Outcome<Upload>> {
	const { request } = event;
	const mimeType = (request.headers.get('content-type') ?? '').split(';')[0]?.trim().toLowerCase() ?? '';
	// Without a body there may be no media type either: that is an empty file, not an unknown one.
	const name = NAMES[mimeType] ?? (mimeType === '' && request.body === null ? 'evidence' : undefined);
	if (name === undefined)
		return fail(
			'unsupported',
			`Send the evidence as ${Object.keys(NAMES).join(', ')}, or as multipart/form-data with files named evidence.`
		);
	const size = refuseOversized(request);
	if (!size.ok) return size;
	const path = await makeSpoolPath('raw');
	const hash = createHash('sha256');
	let bytes = 0;
	async function* measure(): AsyncGenerator<Uint8Array> {
		if (request.body === null) return;
		for await (const chunk of readLimited(request.body)) {
			hash.update(chunk);
			bytes += chunk.byteLength;
			yield chunk;
		}
	}
	try {
		await pipeline(Readable.from(measure()), createWriteStream(path, { flags: 'wx', mode: PRIVATE_FILE }));
	} catch (error) {
		await removeFromSpool([path]);
		if (isStorageFault(error)) throw error;
		if (error instanceof BodyTooLarge) return refuseTooLarge();
		return fail('invalid', 'The request ended before its body was whole. Send it again.');
	}
	return ok({ path, name, bytes, mimeType, rawSha256: hash.digest('hex') });
}
