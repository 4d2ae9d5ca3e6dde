import type { RequestEvent } from '@sveltejs/kit';
import * as sessions from '../sessions/sessions-service';
import { SESSION_COOKIE } from './credentials';
import { setSessionCookie } from './session-cookie';

/** Signs a person in, in this browser: always a new session; the one before it ends. */
export async function startSession(event: RequestEvent, personId: number): Promise<void> {
	const before = event.cookies.get(SESSION_COOKIE);
	if (before !== undefined) await sessions.end(before);
	setSessionCookie(event, await sessions.create(personId, event.request.headers.get('user-agent')));
}

/** Tells a program, too, how long to wait after too many tries. */
export function setRetryAfter(event: RequestEvent, seconds: number | undefined): void {
	if (seconds !== undefined) event.setHeaders({ 'retry-after': String(seconds) });
}
