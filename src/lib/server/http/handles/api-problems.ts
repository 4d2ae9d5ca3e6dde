import type { Handle } from '@sveltejs/kit';
import { isApiPath } from '../api-path';

const TITLES: Record<number, { title: string; code: string; detail: string }> = {
	400: { title: 'Bad Request', code: 'invalid', detail: 'The request does not fit.' },
	401: { title: 'Unauthorized', code: 'unauthenticated', detail: 'Send a token, or sign in.' },
	403: { title: 'Forbidden', code: 'forbidden', detail: 'Your role does not allow this.' },
	404: { title: 'Not Found', code: 'not_found', detail: 'There is no such call.' },
	405: { title: 'Method Not Allowed', code: 'method_not_allowed', detail: 'This call takes another method.' },
	413: { title: 'Content Too Large', code: 'too_large', detail: 'The request is larger than allowed.' },
	415: { title: 'Unsupported Media Type', code: 'unsupported', detail: 'Send another media type.' }
};

const UNEXPECTED = {
	title: 'Internal Server Error',
	code: 'unexpected',
	detail: 'Something went wrong here. The log holds the detail under the id.'
};

/** What Kit's own error body says; an empty object where it is a page or nothing. */
async function readKitError(
	response: Response
): Promise<{ message?: unknown; code?: unknown; reasons?: unknown }> {
	if (!response.headers.get('content-type')?.startsWith('application/json')) return {};
	const body: unknown = await response.json();
	return typeof body === 'object' && body !== null ? body : {};
}

/**
 * Gives every error under /api/v1 the one shape (RFC 9457): also those that Kit makes itself, such as 404,
 * 405 and whatever was thrown. The id is the request's, under which the log holds the detail.
 */
export const shapeApiErrors: Handle = async ({ event, resolve }) => {
	const response = await resolve(event);
	if (response.status < 400 || !isApiPath(event.url)) return response;
	if (response.headers.get('content-type')?.startsWith('application/problem+json')) return response;
	const { status } = response;
	const row = TITLES[status] ?? { ...UNEXPECTED, ...(status < 500 ? { code: 'invalid' } : {}) };
	const kit = status < 500 ? await readKitError(response) : {};
	const headers = new Headers({ 'content-type': 'application/problem+json' });
	for (const name of ['allow', 'retry-after', 'www-authenticate', 'set-cookie']) {
		const value = response.headers.get(name);
		if (value) headers.set(name, value);
	}
	const body = {
		type: 'about:blank',
		title: row.title,
		status,
		detail: typeof kit.message === 'string' && status !== 404 ? kit.message : row.detail,
		code: typeof kit.code === 'string' ? kit.code : row.code,
		reasons: Array.isArray(kit.reasons) ? kit.reasons : undefined,
		id: status >= 500 ? event.locals.requestId : undefined
	};
	return new Response(JSON.stringify(body), { status, headers });
};
