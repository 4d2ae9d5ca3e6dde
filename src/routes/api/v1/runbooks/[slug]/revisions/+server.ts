import { pageQuery } from '$lib/domain/incident/incident-filter';
import { respondPage } from '$lib/server/api/answers';
import { readQuery } from '$lib/server/http/api';
import { requireActor } from '$lib/server/http/guard';
import { respond } from '$lib/server/http/respond';
import * as runbooks from '$lib/server/runbooks/runbooks-service';
import type { RequestHandler } from './$types';

export const GET = (async (event) => {
	const actor = requireActor(event);
	const query = readQuery(event.url, pageQuery);
	if (!query.ok) return respond(query);
	return respondPage(event, await runbooks.revisions(actor, event.params.slug, query.value));
}) satisfies RequestHandler;
