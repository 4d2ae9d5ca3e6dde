import { respondMove } from '$lib/server/api/receive-move';
import * as runbooks from '$lib/server/runbooks/runbooks-service';
import type { RequestHandler } from './$types';

export const POST = ((event) =>
	respondMove(event, (actor, note, based) =>
		runbooks.retire(actor, event.params.slug, note, based)
	)) satisfies RequestHandler;
