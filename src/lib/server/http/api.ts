import type { RequestEvent } from '@sveltejs/kit';
import type { z } from 'zod';
import { fail, ok, type Outcome } from '$lib/domain/problem';
import { toFields, validate } from './fields';

/** The longest JSON body read into memory; evidence never travels as JSON. */
const MAX_JSON_BYTES = 8 * 1024 * 1024;

/** Whether Kit cut the request off at BODY_SIZE_LIMIT. */
function isTooLarge(error: unknown): boolean {
	return error instanceof Error && 'status' in error && error.status === 413;
}

async function readText(request: Request): Promise<Outcome<string>> {
	const tooLarge = fail('too_large', `The JSON is larger than ${MAX_JSON_BYTES} bytes.`);
	if (Number(request.headers.get('content-length') ?? 0) > MAX_JSON_BYTES) return tooLarge;
	if (!request.body) return ok('');
	const decoder = new TextDecoder('utf-8', { fatal: true });
	let text = '';
	let bytes = 0;
	try {
		const reader = request.body.getReader();
		for (let part = await reader.read(); !part.done; part = await reader.read()) {
			bytes += part.value.byteLength;
			if (bytes > MAX_JSON_BYTES) {
				await reader.cancel();
				return tooLarge;
			}
			text += decoder.decode(part.value, { stream: true });
		}
		return ok(text + decoder.decode());
	} catch (error) {
		if (isTooLarge(error)) return tooLarge;
		// The fatal decoder's word for bytes that are no UTF-8.
		if (error instanceof TypeError) return fail('invalid', 'The body is not UTF-8.');
		throw error;
	}
}

/** Parses JSON; a syntax error becomes `invalid` with the engine's own position. */
export function parseJson(text: string): Outcome<unknown> {
	try {
		return ok(JSON.parse(text));
	} catch (error) {
		const reason = error instanceof Error ? error.message : String(error);
		return fail('invalid', `The body is not JSON: ${reason}.`);
	}
}

/** The body of an API call, read as JSON against a schema. */
export async function readJson<S extends z.ZodType>(
	event: Pick<RequestEvent, 'request'>,
	schema: S
): Promise<Outcome<z.output<S>>> {
	const type = event.request.headers.get('content-type') ?? '';
	if (!/^application\/([\w.-]+\+)?json\b/i.test(type)) {
		return fail('unsupported', 'Send the body as application/json.');
	}
	const text = await readText(event.request);
	if (!text.ok) return text;
	const value = parseJson(text.value);
	return value.ok ? validate(schema, value.value) : value;
}

/** The query of an API call or page against a schema; names that the schema doesn't know are ignored. */
export function readQuery<S extends z.ZodObject>(url: URL, schema: S): Outcome<z.output<S>> {
	return validate(
		schema,
		toFields(schema.shape, (name) => url.searchParams.getAll(name))
	);
}

/**
 * The revision that an edit is based on, out of `If-Match: "7"`. Without the header 428. `*` would overwrite
 * whatever stands there, so it doesn't count as naming a revision. A weak tag never matches (RFC 9110
 * section 13.1.1): 412.
 */
export function requireIfMatch(event: Pick<RequestEvent, 'request'>): Outcome<number> {
	const header = event.request.headers.get('if-match')?.trim();
	if (!header || header === '*') {
		return fail(
			'precondition_required',
			'Send If-Match with the ETag of the revision that you read, such as "7".'
		);
	}
	const revision = /^"(\d{1,15})"$/.exec(header)?.[1];
	if (revision === undefined) return fail('stale', `If-Match ${header} is no revision of this thing.`);
	return ok(Number(revision));
}
