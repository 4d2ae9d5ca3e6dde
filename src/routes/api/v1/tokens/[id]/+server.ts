import { readNumber } from '$lib/server/api/params';
import { requireActor } from '$lib/server/http/guard';
import { respond } from '$lib/server/http/respond';
import * as tokens from '$lib/server/sessions/tokens-service';
import type { RequestHandler } from './$types';

export const GET = (async (event) => {
	const actor = requireActor(event);
	const id = readNumber(event.params.id);
	return respond(id.ok ? await tokens.read(actor, id.value) : id);
}) satisfies RequestHandler;

export const DELETE = (async (event) => {
	const actor = requireActor(event);
	const id = readNumber(event.params.id);
	return id.ok ? respond(await tokens.revoke(actor, id.value), { status: 204 }) : respond(id);
}) satisfies RequestHandler;
