import { respondAttached } from '$lib/server/api/answers';
import { readNumber } from '$lib/server/api/params';
import * as evidence from '$lib/server/evidence/evidence-service';
import { receiveUploads } from '$lib/server/evidence/receive-uploads';
import { requireActor } from '$lib/server/http/guard';
import { idempotent } from '$lib/server/http/idempotency';
import { respond } from '$lib/server/http/respond';
import type { RequestHandler } from './$types';

export const POST = ((event) =>
	idempotent(event, async () => {
		const actor = requireActor(event);
		const number = readNumber(event.params.number);
		if (!number.ok) return respond(number);
		const received = await receiveUploads(event, { field: 'evidence' });
		if (!received.ok) return respond(received);
		return respondAttached(await evidence.attach(actor, number.value, received.value.uploads));
	})) satisfies RequestHandler;
