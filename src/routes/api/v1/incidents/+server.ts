import { incidentFilter } from '$lib/domain/incident/incident-filter';
import { respondMade, respondPage } from '$lib/server/api/answers';
import { receiveIncident } from '$lib/server/api/receive-incident';
import { readQuery } from '$lib/server/http/api';
import { requireActor } from '$lib/server/http/guard';
import { idempotent } from '$lib/server/http/idempotency';
import { respond } from '$lib/server/http/respond';
import * as incidents from '$lib/server/incidents/incidents-service';
import type { RequestHandler } from './$types';

export const GET = (async (event) => {
	const actor = requireActor(event);
	const filter = readQuery(event.url, incidentFilter);
	return filter.ok ? respondPage(event, await incidents.list(actor, filter.value)) : respond(filter);
}) satisfies RequestHandler;

export const POST = ((event) =>
	idempotent(event, async () => {
		const actor = requireActor(event);
		const received = await receiveIncident(event);
		if (!received.ok) return respond(received);
		const { input, uploads } = received.value;
		return respondMade(
			await incidents.create(actor, input, uploads),
			({ number }) => `/api/v1/incidents/${number}`
		);
	})) satisfies RequestHandler;
