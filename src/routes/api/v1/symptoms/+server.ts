import { requireActor } from '$lib/server/http/guard';
import { respond } from '$lib/server/http/respond';
import * as symptoms from '$lib/server/symptoms/symptoms-service';
import type { RequestHandler } from './$types';

export const GET = (async (event) =>
	respond(await symptoms.list(requireActor(event)))) satisfies RequestHandler;
