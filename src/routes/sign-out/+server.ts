import { redirect } from '@sveltejs/kit';
import { SESSION_COOKIE } from '$lib/server/http/credentials';
import { setSessionCookie } from '$lib/server/http/session-cookie';
import * as sessions from '$lib/server/sessions/sessions-service';
import type { RequestHandler } from './$types';

/** Ends this session for good, here and in the browser. */
export const POST: RequestHandler = async (event) => {
	const id = event.cookies.get(SESSION_COOKIE);
	if (id !== undefined) setSessionCookie(event, await sessions.end(id));
	redirect(303, '/sign-in');
};
