import { compareQuery } from '$lib/domain/runbook/runbook-input';
import { readQuery } from '$lib/server/http/api';
import { requireActor } from '$lib/server/http/guard';
import { respond } from '$lib/server/http/respond';
import * as runbooks from '$lib/server/runbooks/runbooks-service';
import type { RequestHandler } from './$types';

export const GET = (async (event) => {
	const query = readQuery(event.url, compareQuery);
	if (!query.ok) return respond(query);
	return respond(await runbooks.compare(requireActor(event), event.params.slug, query.value));
}) satisfies RequestHandler;
