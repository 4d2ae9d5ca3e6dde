import { respondOne } from '$lib/server/api/answers';
import { readNumber } from '$lib/server/api/params';
import { requireActor } from '$lib/server/http/guard';
import { respond } from '$lib/server/http/respond';
import * as runbooks from '$lib/server/runbooks/runbooks-service';
import type { RequestHandler } from './$types';

export const GET = (async (event) => {
	const number = readNumber(event.params.n);
	if (!number.ok) return respond(number);
	return respondOne(await runbooks.revision(requireActor(event), event.params.slug, number.value));
}) satisfies RequestHandler;
