import { fail, type Outcome, type Problem } from '$lib/domain/problem';
import { config } from '../config';

const BYTES_PER_MB = 1024 * 1024;

/** A client that goes on sending after its refusal is listened to for so long, then cut off. */
const DRAIN_MS = 30_000;

/** The most that one request may carry, bytes. */
export function maxUploadBytes(): number {
	return config().maxUploadMb * BYTES_PER_MB;
}

/** The refusal of what is too large, with the limit in it. */
export function refuseTooLarge(): { ok: false; problem: Problem } {
	return fail(
		'too_large',
		`This is larger than ${config().maxUploadMb} MB, the most that is taken at once (MAX_UPLOAD_MB). ` +
			'Cut the log to the minutes around the incident, or send the files one by one.'
	);
}

/** Thrown inside the stream of a body that announced no length and turned out too long. */
export class BodyTooLarge extends Error {}

/**
 * Refuses by the announced length, before a byte is read. What the client has already on its way is thrown
 * away in the background: the answer is out, and a client that reads no answer until it has sent everything
 * isn't left hanging.
 */
export function refuseOversized(request: Request): Outcome<null> {
	const announced = Number(request.headers.get('content-length') ?? 0);
	if (!(announced > maxUploadBytes())) return { ok: true, value: null };
	if (request.body !== null) void discard(request.body.getReader());
	return refuseTooLarge();
}

async function discard(reader: ReadableStreamDefaultReader<Uint8Array>): Promise<void> {
	const until = Date.now() + DRAIN_MS;
	try {
		while (Date.now() < until) if ((await reader.read()).done) return;
		await reader.cancel('refused as too large');
	} catch (_gone) {
		// The client hung up after it read the refusal, which is what it was told to do.
		return;
	}
}

/**
 * The chunks of a body, up to the limit; beyond it, throws BodyTooLarge and throws the rest away in the
 * background.
 */
export async function* readLimited(body: ReadableStream<Uint8Array>): AsyncGenerator<Uint8Array> {
	const most = maxUploadBytes();
	const reader = body.getReader();
	let bytes = 0;
	let ended = false;
	try {
		for (;;) {
			const { done, value } = await reader.read();
			if (done) {
				ended = true;
				return;
			}
			bytes += value.byteLength;
			if (bytes > most) throw new BodyTooLarge();
			yield value;
		}
	} finally {
		// The consumer stopped early, or the limit was passed: the connection is kept for the answer.
		if (!ended) void discard(reader);
	}
}
