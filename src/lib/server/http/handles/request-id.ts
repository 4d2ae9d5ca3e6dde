import { randomUUID } from 'node:crypto';
import type { Handle } from '@sveltejs/kit';
import type { Actor } from '$lib/domain/person/person';
import { log } from '$lib/server/log';

function personIdOf(actor: Actor | null): number | null {
	return actor?.personId ?? null;
}

/** Names the request, starts it with nobody acting, and writes its line into the log. */
export const nameRequest: Handle = async ({ event, resolve }) => {
	event.locals.requestId = randomUUID();
	event.locals.actor = null;
	const startedMs = performance.now();
	const response = await resolve(event);
	response.headers.set('x-request-id', event.locals.requestId);
	// The route's id, not the path: a sign-in link's secret stands in the path.
	log().debug(
		{
			id: event.locals.requestId,
			method: event.request.method,
			route: event.route.id,
			status: response.status,
			person: personIdOf(event.locals.actor),
			ms: Math.round(performance.now() - startedMs)
		},
		'request'
	);
	return response;
};
