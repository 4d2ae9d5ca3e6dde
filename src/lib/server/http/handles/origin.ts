import type { Handle } from '@sveltejs/kit';
import { config } from '$lib/server/config';
import { readBearer, SESSION_COOKIE } from '../credentials';
import { refuse } from '../refuse';

const SAFE_METHODS = ['GET', 'HEAD', 'OPTIONS'];

/**
 * Stops another site's page from acting with a visitor's cookie. Browsers send Origin with every request that
 * changes something; programs send none and carry a token, which no foreign page can know. So:
 * with a token, no check (and no cookie is looked at); with the cookie, Origin must be ours; without either
 * (signing in), a foreign Origin is refused.
 */
export const checkOrigin: Handle = async ({ event, resolve }) => {
	if (SAFE_METHODS.includes(event.request.method) || readBearer(event.request) !== null) {
		return resolve(event);
	}
	const origin = event.request.headers.get('origin');
	const isOurs = origin !== null && (origin === event.url.origin || origin === config().origin);
	const isAllowed = isOurs || (origin === null && event.cookies.get(SESSION_COOKIE) === undefined);
	if (isAllowed) return resolve(event);
	return refuse(event, {
		code: 'forbidden',
		detail:
			`The request comes from ${origin ?? 'a program'}, and this server is set up as ${config().origin} (ORIGIN). ` +
			'Programs send a token instead of the cookie.'
	});
};
