import type { Handle } from '@sveltejs/kit';
import { countTokenGuess, tokenWaitSeconds } from '$lib/server/people/sign-in-limits';
import * as tokens from '$lib/server/sessions/tokens-service';
import { isApiPath } from '../api-path';
import { readBearer } from '../credentials';
import { refuse } from '../refuse';

/** Sets the actor by `Authorization: Bearer cw_…`, on API routes alone: pages are for people. */
export const readToken: Handle = async ({ event, resolve }) => {
	const bearer = readBearer(event.request);
	// An API address without a route opens nothing: who holds a token is told so by a 404.
	const isForPrograms = event.route.id?.startsWith('/api/') ?? isApiPath(event.url);
	if (bearer === null || !isForPrograms) return resolve(event);
	event.locals.actor = await tokens.validate(bearer);
	if (event.locals.actor) return resolve(event);
	// Asked only of who has no good token: a stranger behind the same proxy shuts nobody out.
	const address = event.getClientAddress();
	const waitSeconds = await tokenWaitSeconds(address);
	if (waitSeconds !== null) {
		const detail = 'Too many unknown tokens came from this address.';
		return refuse(event, { code: 'rate_limited', detail, retryAfterSeconds: waitSeconds });
	}
	await countTokenGuess(address);
	return resolve(event);
};
