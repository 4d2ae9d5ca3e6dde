import { runbookFilter } from '$lib/domain/runbook/runbook-filter';
import { runbookInput } from '$lib/domain/runbook/runbook-input';
import { respondMade, respondPage } from '$lib/server/api/answers';
import { readJson, readQuery } from '$lib/server/http/api';
import { requireActor } from '$lib/server/http/guard';
import { idempotent } from '$lib/server/http/idempotency';
import { respond } from '$lib/server/http/respond';
import * as runbooks from '$lib/server/runbooks/runbooks-service';
import type { RequestHandler } from './$types';

export const GET = (async (event) => {
	const actor = requireActor(event);
	const filter = readQuery(event.url, runbookFilter);
	return filter.ok ? respondPage(event, await runbooks.list(actor, filter.value)) : respond(filter);
}) satisfies RequestHandler;

export const POST = ((event) =>
	idempotent(event, async () => {
		const actor = requireActor(event);
		const input = await readJson(event, runbookInput);
		if (!input.ok) return respond(input);
		return respondMade(await runbooks.create(actor, input.value), ({ slug }) => `/api/v1/runbooks/${slug}`);
	})) satisfies RequestHandler;
