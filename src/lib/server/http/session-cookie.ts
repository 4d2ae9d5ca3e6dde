import type { RequestEvent } from '@sveltejs/kit';
import type { Cookie } from 'lucia';

/** Sends a session's cookie (or the blank one that ends it) with the answer. */
export function setSessionCookie(event: Pick<RequestEvent, 'cookies'>, cookie: Cookie): void {
	event.cookies.set(cookie.name, cookie.value, { path: '/', ...cookie.attributes });
}
