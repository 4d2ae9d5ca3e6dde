import { receiveEvidence } from '$lib/server/evidence/receive-evidence';
import { linkRunbooks } from '$lib/server/evidence/link-runbooks';
import { idempotent } from '$lib/server/http/idempotency';
import { requireActor } from '$lib/server/http/guard';
import { respond } from '$lib/server/http/respond';
import * as readings from '$lib/server/readings/readings-service';
import type { RequestHandler } from './$types';

export const POST = ((event) =>
	idempotent(event, async () => {
		const actor = requireActor(event);
		const uploads = await receiveEvidence(event);
		if (!uploads.ok) return respond(uploads);
		const read = await readings.read(actor, uploads.value);
		if (!read.ok) return respond(read);
		return respond({ ok: true, value: { readings: await linkRunbooks(actor, read.value) } });
	})) satisfies RequestHandler;
