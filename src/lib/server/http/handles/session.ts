import type { Handle } from '@sveltejs/kit';
import * as sessions from '$lib/server/sessions/sessions-service';
import { readBearer, SESSION_COOKIE } from '../credentials';
import { setSessionCookie } from '../session-cookie';

/** Sets the actor by the session cookie. A request with a token never uses the cookie. */
export const readSession: Handle = async ({ event, resolve }) => {
	const id = event.cookies.get(SESSION_COOKIE);
	if (id !== undefined && readBearer(event.request) === null) {
		const { actor, cookie } = await sessions.validate(id);
		event.locals.actor = actor;
		if (cookie) setSessionCookie(event, cookie);
	}
	return resolve(event);
};
