import { incidentPatch } from '$lib/domain/incident/incident-input';
import { respondEdit, respondOne } from '$lib/server/api/answers';
import { readNumber } from '$lib/server/api/params';
import { requireActor } from '$lib/server/http/guard';
import { respond } from '$lib/server/http/respond';
import * as incidents from '$lib/server/incidents/incidents-service';
import type { RequestHandler } from './$types';

export const GET = (async (event) => {
	const actor = requireActor(event);
	const number = readNumber(event.params.number);
	return number.ok ? respondOne(await incidents.read(actor, number.value)) : respond(number);
}) satisfies RequestHandler;

export const PATCH = (async (event) => {
	const number = readNumber(event.params.number);
	if (!number.ok) return respond(number);
	return respondEdit(event, incidentPatch, (actor, revision, patch) =>
		incidents.update(actor, number.value, revision, patch)
	);
}) satisfies RequestHandler;
