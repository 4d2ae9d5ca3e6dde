import { pageQuery } from '$lib/domain/incident/incident-filter';
import { invitationInput } from '$lib/domain/person/person-input';
import { respondMade, respondPage } from '$lib/server/api/answers';
import { readJson, readQuery } from '$lib/server/http/api';
import { requireActor } from '$lib/server/http/guard';
import { idempotent } from '$lib/server/http/idempotency';
import { respond } from '$lib/server/http/respond';
import * as invitations from '$lib/server/people/invitations-service';
import type { RequestHandler } from './$types';

export const GET = (async (event) => {
	const actor = requireActor(event);
	const query = readQuery(event.url, pageQuery);
	return query.ok ? respondPage(event, await invitations.list(actor, query.value)) : respond(query);
}) satisfies RequestHandler;

export const POST = ((event) =>
	idempotent(event, async () => {
		const actor = requireActor(event);
		const input = await readJson(event, invitationInput);
		if (!input.ok) return respond(input);
		return respondMade(await invitations.invite(actor, input.value), ({ id }) => `/api/v1/invitations/${id}`);
	})) satisfies RequestHandler;
