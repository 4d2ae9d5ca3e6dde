import type { Handle, RequestEvent } from '@sveltejs/kit';
import { couldEver } from '$lib/domain/person/can';
import { isApiPath } from '../api-path';
import { refuse, sendTo, showRefusal } from '../refuse';
import { findAccess, listMethods, ROUTE_PERMISSIONS } from '../route-permissions';

/** `?/publish` → `publish`; the unnamed action is `default`. */
function readActionName(event: RequestEvent): string {
	for (const name of event.url.searchParams.keys()) {
		if (name.startsWith('/')) return name.slice(1);
	}
	return 'default';
}

/** Where to go for signing in, and back: to the page itself for what cannot be sent again. */
function signInPath(event: RequestEvent): string {
	const { pathname, search } = event.url;
	const next = event.request.method === 'GET' ? pathname + search : pathname;
	return next === '/' ? '/sign-in' : `/sign-in?next=${encodeURIComponent(next)}`;
}

/** A stranger learns nothing: what exists, what is missing and what is closed all ask to sign in. */
function askToSignIn(event: RequestEvent): Response {
	if (!isApiPath(event.url)) return sendTo(event, signInPath(event));
	return refuse(event, { code: 'unauthenticated', detail: 'Send a token, or sign in.' });
}

/** A method that is not in the table is refused, whether the route has it or not. */
function refuseMethod(event: RequestEvent, routeId: string): Response {
	return new Response(`${event.request.method} is not allowed here.`, {
		status: 405,
		headers: { allow: listMethods(routeId).join(', '), 'content-type': 'text/plain; charset=utf-8' }
	});
}

/**
 * Refuses every call that route-permissions.ts does not allow; the one place where that is decided. Nothing
 * goes by the address: only the matched route's id counts.
 */
export const denyByDefault: Handle = async ({ event, resolve }) => {
	const { actor } = event.locals;
	const routeId = event.route.id;
	const access = routeId === null ? null : findAccess(routeId, event.request.method, readActionName(event));
	if (access === 'open') return resolve(event);
	if (!actor) return askToSignIn(event);
	// No route: Kit answers 404.
	if (routeId === null) return resolve(event);
	if (!ROUTE_PERMISSIONS[routeId]) {
		return showRefusal(event, { code: 'forbidden', detail: 'This is not open to anybody yet.' });
	}
	if (access === null) return refuseMethod(event, routeId);
	if (!couldEver(actor, access)) {
		return showRefusal(event, {
			code: 'forbidden',
			detail: `The role ${actor.role} does not allow this.`
		});
	}
	return resolve(event);
};
