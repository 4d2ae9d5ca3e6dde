import { auditQuery } from '$lib/domain/audit/audit-query';
import * as audit from '$lib/server/audit/audit-service';
import { readQuery } from '$lib/server/http/api';
import { requireActor } from '$lib/server/http/guard';
import { unwrap } from '$lib/server/http/respond';
import * as people from '$lib/server/people/people-service';
import type { PageServerLoad } from './$types';

export const load = (async (event) => {
	const actor = requireActor(event);
	const asked = readQuery(event.url, auditQuery);
	// A filter that does not fit is said beside the form; the list is then the whole one.
	const query = asked.ok ? asked.value : auditQuery.parse({});
	const [page, actions, everybody] = await Promise.all([
		audit.list(actor, query),
		audit.listActions(actor),
		people.list(actor)
	]);
	return {
		page: unwrap(page),
		actions: unwrap(actions),
		people: unwrap(everybody).map(({ id, name }) => ({ id, name })),
		issues: asked.ok ? [] : (asked.problem.errors ?? [])
	};
}) satisfies PageServerLoad;
