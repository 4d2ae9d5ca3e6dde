import { ok } from '$lib/domain/problem';
import { readOnce } from '$lib/server/evidence/read-once';
import { receiveEvidence } from '$lib/server/evidence/receive-evidence';
import { idempotent } from '$lib/server/http/idempotency';
import { requireActor } from '$lib/server/http/guard';
import { respond } from '$lib/server/http/respond';
import type { RequestHandler } from './$types';

export const POST = ((event) =>
	idempotent(event, async () => {
		const actor = requireActor(event);
		const uploads = await receiveEvidence(event);
		if (!uploads.ok) return respond(uploads);
		const read = await readOnce(actor, uploads.value);
		return respond(read.ok ? ok({ readings: read.value }) : read);
	})) satisfies RequestHandler;
