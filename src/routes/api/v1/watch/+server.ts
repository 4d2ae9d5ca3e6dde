import { requireActor } from '$lib/server/http/guard';
import { respond } from '$lib/server/http/respond';
import * as watch from '$lib/server/watch/watch-service';
import type { RequestHandler } from './$types';

export const GET = (async (event) =>
	respond(await watch.overview(requireActor(event)))) satisfies RequestHandler;
