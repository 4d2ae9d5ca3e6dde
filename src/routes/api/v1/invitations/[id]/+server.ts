import { respondOne } from '$lib/server/api/answers';
import { readNumber } from '$lib/server/api/params';
import { requireActor } from '$lib/server/http/guard';
import { respond } from '$lib/server/http/respond';
import * as invitations from '$lib/server/people/invitations-service';
import type { RequestHandler } from './$types';

export const GET = (async (event) => {
	const actor = requireActor(event);
	const id = readNumber(event.params.id);
	return id.ok ? respondOne(await invitations.read(actor, id.value)) : respond(id);
}) satisfies RequestHandler;

export const DELETE = (async (event) => {
	const actor = requireActor(event);
	const id = readNumber(event.params.id);
	return id.ok ? respond(await invitations.revoke(actor, id.value), { status: 204 }) : respond(id);
}) satisfies RequestHandler;
