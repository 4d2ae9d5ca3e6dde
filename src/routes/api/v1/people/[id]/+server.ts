import { personPatch } from '$lib/domain/person/person-input';
import { respondEdit, respondOne } from '$lib/server/api/answers';
import { readNumber } from '$lib/server/api/params';
import { requireActor } from '$lib/server/http/guard';
import { respond } from '$lib/server/http/respond';
import * as people from '$lib/server/people/people-service';
import type { RequestHandler } from './$types';

export const GET = (async (event) => {
	const actor = requireActor(event);
	const id = readNumber(event.params.id);
	return id.ok ? respondOne(await people.read(actor, id.value)) : respond(id);
}) satisfies RequestHandler;

export const PATCH = (async (event) => {
	const id = readNumber(event.params.id);
	if (!id.ok) return respond(id);
	return respondEdit(event, personPatch, (actor, revision, patch) =>
		people.update(actor, id.value, revision, patch)
	);
}) satisfies RequestHandler;
