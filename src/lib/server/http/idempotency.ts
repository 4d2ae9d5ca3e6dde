import type { RequestEvent } from '@sveltejs/kit';
import { fail } from '$lib/domain/problem';
import { BodyHash } from './body-hash';
import { requireActor } from './guard';
import { keepAnswer, releaseKey, takeKey, type KeptAnswer, type KeyName } from './idempotency-store';
import { problemResponse } from './respond';

const MAX_KEY_LENGTH = 200;
const KEPT_HEADERS = ['content-type', 'location', 'etag'];

/** Reads what is left of a body to its end. */
async function drain(body: ReadableStream<Uint8Array> | null, hash: BodyHash): Promise<void> {
	if (!body) return;
	const reader = body.getReader();
	for (let part = await reader.read(); !part.done; part = await reader.read()) hash.update(part.value);
}

/** Puts a copy of the request into the event whose body is hashed on its way to the reader. */
function hashBody(event: RequestEvent, hash: BodyHash): void {
	const { request } = event;
	if (!request.body) return;
	const hashing = new TransformStream<Uint8Array, Uint8Array>({
		transform(chunk, controller) {
			hash.update(chunk);
			controller.enqueue(chunk);
		}
	});
	const body = request.body.pipeThrough(hashing);
	// Node asks for `duplex` with a streamed body; the DOM's types don't know it.
	const init: RequestInit & { duplex: 'half' } = {
		method: request.method,
		headers: request.headers,
		body,
		duplex: 'half'
	};
	event.request = new Request(request.url, { ...init, signal: request.signal });
}

async function replay(event: RequestEvent, kept: KeptAnswer, hash: BodyHash): Promise<Response> {
	await drain(event.request.body, hash);
	if (hash.finish() !== kept.bodyHash) {
		const detail = 'This Idempotency-Key was used with another body. Take a new key for a new request.';
		return problemResponse({ code: 'conflict', detail });
	}
	return new Response(kept.body, {
		status: kept.status,
		headers: { ...kept.headers, 'idempotency-replayed': 'true' }
	});
}

/** Keeps the answer where the call did something; frees the key where it didn't. */
async function settle(
	name: KeyName,
	response: Response,
	event: RequestEvent,
	hash: BodyHash,
	toKept: (body: string) => string
): Promise<Response> {
	if (!response.ok) {
		await releaseKey(name);
		return response;
	}
	if (!event.request.bodyUsed) await drain(event.request.body, new BodyHash(''));
	const body = await response.text();
	const headers: Record<string, string> = {};
	for (const header of KEPT_HEADERS) {
		const value = response.headers.get(header);
		if (value !== null) headers[header] = value;
	}
	await keepAnswer(name, {
		bodyHash: hash.finish(),
		status: response.status,
		headers,
		body: toKept(body)
	});
	return new Response(body, { status: response.status, headers: response.headers });
}

/**
 * Runs a POST at most once for each Idempotency-Key of a person and address, within 24 h: the same key with
 * the same body gets the first answer again, with another body 422, while the first is under way 409. Only
 * success is kept: after a failure nothing was done, and the key is free. Without the header it just runs.
 * `toKept` takes out of an answer what may be kept nowhere: a replay comes without it.
 */
export async function idempotent(
	event: RequestEvent,
	run: (event: RequestEvent) => Promise<Response>,
	toKept: (body: string) => string = (body) => body
): Promise<Response> {
	const key = event.request.headers.get('idempotency-key');
	if (key === null) return run(event);
	if (key === '' || key.length > MAX_KEY_LENGTH) {
		return problemResponse(
			fail('invalid', `An Idempotency-Key has 1 to ${MAX_KEY_LENGTH} characters.`).problem
		);
	}
	const { personId } = requireActor(event);
	const route = `${event.request.method} ${event.url.pathname}${event.url.search}`;
	const name: KeyName = { who: `person:${personId}`, route, key };
	const hash = new BodyHash(event.request.headers.get('content-type') ?? '');
	const found = await takeKey(name);
	if (found === 'running') {
		const detail = 'The first request with this Idempotency-Key is still under way.';
		return problemResponse({ code: 'refused', detail, reasons: [detail], retryAfterSeconds: 1 });
	}
	if (found !== 'taken') return replay(event, found, hash);
	hashBody(event, hash);
	try {
		return await settle(name, await run(event), event, hash, toKept);
	} catch (error) {
		// Whatever it was, the key must not stay taken by a call that is over.
		await releaseKey(name);
		throw error;
	}
}
