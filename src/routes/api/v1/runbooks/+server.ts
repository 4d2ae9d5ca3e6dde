import { runbookFilter } from '$lib/domain/runbook/runbook-filter';
import { respondPage } from '$lib/server/api/answers';
import { readQuery } from '$lib/server/http/api';
import { requireActor } from '$lib/server/http/guard';
import { respond } from '$lib/server/http/respond';
import * as runbooks from '$lib/server/runbooks/runbooks-service';
import type { RequestHandler } from './$types';

export const GET = (async (event) => {
	const actor = requireActor(event);
	const filter = readQuery(event.url, runbookFilter);
	return filter.ok ? respondPage(event, await runbooks.list(actor, filter.value)) : respond(filter);
}) satisfies RequestHandler;
