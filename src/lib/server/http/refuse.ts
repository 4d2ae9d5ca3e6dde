import { error, redirect, type RequestEvent } from '@sveltejs/kit';
import type { Problem } from '$lib/domain/problem';
import { isApiPath } from './api-path';
import { problemResponse, statusOf } from './respond';

/**
 * Whether Kit's own script asks, for a page's data or with a form: it wants Kit's JSON, which only a thrown
 * error or redirect gets it.
 */
function isAskedByScript(event: RequestEvent): boolean {
	return event.isDataRequest || event.request.headers.has('x-sveltekit-action');
}

/** Refuses a request in a handle: problem+json to a program, an error to Kit's script, plain words else. */
export function refuse(event: RequestEvent, problem: Problem): Response {
	if (isApiPath(event.url)) return problemResponse(problem);
	const status = statusOf(problem.code);
	if (isAskedByScript(event)) error(status, { message: problem.detail, code: problem.code });
	const headers = new Headers({ 'content-type': 'text/plain; charset=utf-8' });
	if (problem.retryAfterSeconds !== undefined) headers.set('retry-after', String(problem.retryAfterSeconds));
	return new Response(problem.detail, { status, headers });
}

/** Sends a visitor elsewhere with 303: whatever was asked, the next request is a GET. */
export function sendTo(event: RequestEvent, path: string): Response {
	if (isAskedByScript(event)) redirect(303, path);
	return new Response(null, { status: 303, headers: { location: path } });
}

/**
 * Shows a signed-in person why a page is closed to them, inside the application: the route `refused` draws
 * nothing but the error.
 */
export async function showRefusal(event: RequestEvent, problem: Problem): Promise<Response> {
	if (isApiPath(event.url) || isAskedByScript(event)) return refuse(event, problem);
	const response = await event.fetch('/refused', { headers: { accept: 'text/html' } });
	return new Response(response.body, { status: statusOf(problem.code), headers: response.headers });
}
