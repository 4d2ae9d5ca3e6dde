import { ok } from '$lib/domain/problem';
import { compareReadings } from '$lib/domain/reading/compare-readings';
import { readPair } from '$lib/server/evidence/compare-once';
import { receivePair } from '$lib/server/evidence/receive-pair';
import { requireActor } from '$lib/server/http/guard';
import { idempotent } from '$lib/server/http/idempotency';
import { respond } from '$lib/server/http/respond';
import type { RequestHandler } from './$types';

export const POST = ((event) =>
	idempotent(event, async () => {
		const actor = requireActor(event);
		const uploads = await receivePair(event);
		if (!uploads.ok) return respond(uploads);
		const pair = await readPair(actor, uploads.value);
		return respond(pair.ok ? ok(compareReadings(pair.value.before, pair.value.after)) : pair);
	})) satisfies RequestHandler;
