import { incidentFilter } from '$lib/domain/incident/incident-filter';
import { readQuery } from '$lib/server/http/api';
import { requireActor } from '$lib/server/http/guard';
import { unwrap } from '$lib/server/http/respond';
import * as incidents from '$lib/server/incidents/incidents-service';
import type { PageServerLoad } from './$types';

export const load = (async (event) => {
	const actor = requireActor(event);
	const asked = readQuery(event.url, incidentFilter);
	// A filter that does not fit is said beside the form; the list is then the whole one.
	const filter = asked.ok ? asked.value : incidentFilter.parse({});
	const [page, services] = await Promise.all([incidents.list(actor, filter), incidents.services(actor)]);
	return {
		page: unwrap(page),
		services: unwrap(services).map(({ service }) => service),
		sort: filter.sort,
		issues: asked.ok ? [] : (asked.problem.errors ?? [])
	};
}) satisfies PageServerLoad;
