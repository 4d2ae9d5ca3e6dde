import { attemptPatch } from '$lib/domain/incident/incident-input';
import { respondEdit, respondOne } from '$lib/server/api/answers';
import { readNumbers } from '$lib/server/api/params';
import { requireActor } from '$lib/server/http/guard';
import { respond } from '$lib/server/http/respond';
import * as attempts from '$lib/server/incidents/attempts-service';
import type { RequestHandler } from './$types';

export const GET = (async (event) => {
	const actor = requireActor(event);
	const ids = readNumbers(event.params.number, event.params.id);
	return ids.ok ? respondOne(await attempts.read(actor, ...ids.value)) : respond(ids);
}) satisfies RequestHandler;

export const PATCH = (async (event) => {
	const ids = readNumbers(event.params.number, event.params.id);
	if (!ids.ok) return respond(ids);
	return respondEdit(event, attemptPatch, (actor, revision, patch) =>
		attempts.update(actor, ...ids.value, revision, patch)
	);
}) satisfies RequestHandler;
