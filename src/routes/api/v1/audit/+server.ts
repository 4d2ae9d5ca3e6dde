import { auditQuery } from '$lib/domain/audit/audit-query';
import { respondPage } from '$lib/server/api/answers';
import * as audit from '$lib/server/audit/audit-service';
import { readQuery } from '$lib/server/http/api';
import { requireActor } from '$lib/server/http/guard';
import { respond } from '$lib/server/http/respond';
import type { RequestHandler } from './$types';

export const GET = (async (event) => {
	const actor = requireActor(event);
	const query = readQuery(event.url, auditQuery);
	return query.ok ? respondPage(event, await audit.list(actor, query.value)) : respond(query);
}) satisfies RequestHandler;
