import { respondOne } from '$lib/server/api/answers';
import { requireActor } from '$lib/server/http/guard';
import * as runbooks from '$lib/server/runbooks/runbooks-service';
import type { RequestHandler } from './$types';

export const GET = (async (event) =>
	respondOne(await runbooks.read(requireActor(event), event.params.slug))) satisfies RequestHandler;
