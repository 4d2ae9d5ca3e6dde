import { runbookQuery } from './runbook-query';
import { readQuery } from '$lib/server/http/api';
import { requireActor } from '$lib/server/http/guard';
import { unwrap } from '$lib/server/http/respond';
import * as runbooks from '$lib/server/runbooks/runbooks-service';
import type { PageServerLoad } from './$types';

export const load = (async (event) => {
	const actor = requireActor(event);
	const asked = readQuery(event.url, runbookQuery);
	// A filter that does not fit is said above the list; the list is then the usual one.
	const { state, ...filter } = asked.ok ? asked.value : runbookQuery.parse({});
	const page = unwrap(await runbooks.list(actor, { ...filter, ...(state === 'any' ? {} : { state }) }));
	return { page, state, issues: asked.ok ? [] : (asked.problem.errors ?? []) };
}) satisfies PageServerLoad;
