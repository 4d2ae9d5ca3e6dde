import { searchInput } from '$lib/domain/search/search-input';
import { readQuery } from '$lib/server/http/api';
import { requireActor } from '$lib/server/http/guard';
import { respond, respondItems } from '$lib/server/http/respond';
import * as search from '$lib/server/search/search-service';
import type { RequestHandler } from './$types';

export const GET = (async (event) => {
	const actor = requireActor(event);
	const query = readQuery(event.url, searchInput);
	return query.ok ? respondItems(await search.find(actor, query.value)) : respond(query);
}) satisfies RequestHandler;
