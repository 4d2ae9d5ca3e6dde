import { readNumbers } from '$lib/server/api/params';
import * as evidence from '$lib/server/evidence/evidence-service';
import { requireActor } from '$lib/server/http/guard';
import { respond } from '$lib/server/http/respond';
import type { RequestHandler } from './$types';

export const DELETE = (async (event) => {
	const actor = requireActor(event);
	const ids = readNumbers(event.params.number, event.params.id);
	return respond(ids.ok ? await evidence.remove(actor, ...ids.value) : ids, { status: 204 });
}) satisfies RequestHandler;
