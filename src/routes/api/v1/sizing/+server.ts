import { sizingInput } from '$lib/domain/sizing/sizing';
import { readJson } from '$lib/server/http/api';
import { requireActor } from '$lib/server/http/guard';
import { idempotent } from '$lib/server/http/idempotency';
import { respond } from '$lib/server/http/respond';
import * as sizing from '$lib/server/sizing/sizing-service';
import type { RequestHandler } from './$types';

export const POST = ((event) =>
	idempotent(event, async () => {
		const actor = requireActor(event);
		const input = await readJson(event, sizingInput);
		return respond(input.ok ? sizing.compute(actor, input.value) : input);
	})) satisfies RequestHandler;
