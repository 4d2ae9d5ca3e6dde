import { peopleQuery } from '$lib/domain/person/people-query';
import { respondPage } from '$lib/server/api/answers';
import { readQuery } from '$lib/server/http/api';
import { requireActor } from '$lib/server/http/guard';
import { respond } from '$lib/server/http/respond';
import * as people from '$lib/server/people/people-service';
import type { RequestHandler } from './$types';

export const GET = (async (event) => {
	const actor = requireActor(event);
	const query = readQuery(event.url, peopleQuery);
	return query.ok ? respondPage(event, await people.listPage(actor, query.value)) : respond(query);
}) satisfies RequestHandler;
