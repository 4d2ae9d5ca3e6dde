import type { HandleServerError } from '@sveltejs/kit';
import { log } from '$lib/server/log';

/** Logs what nobody expected under the request's id, and shows the visitor that id alone. */
export const handleError: HandleServerError = ({ error, event, status, message }) => {
	// Kit comes here for addresses without a route, too: no fault of ours.
	if (status === 404) return { message: 'There is nothing at this address.', code: 'not_found' };
	if (status < 500) return { message };
	const id = event.locals.requestId;
	log().error({ id, err: error, route: event.route.id, method: event.request.method }, 'unexpected error');
	return { message: 'Something went wrong here. The log holds the detail under this number.', id };
};
