import { error, type RequestEvent } from '@sveltejs/kit';
import type { Actor } from '$lib/domain/person/person';

/**
 * Who acts. The deny handle has refused everybody else before a closed route runs; this narrows the type,
 * and is the second lock should a route be opened by mistake.
 */
export function requireActor(event: Pick<RequestEvent, 'locals'>): Actor {
	if (!event.locals.actor) error(401, { message: 'Sign in first.', code: 'unauthenticated' });
	return event.locals.actor;
}
