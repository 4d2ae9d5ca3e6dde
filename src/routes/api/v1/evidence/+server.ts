import { respondAttached } from '$lib/server/api/answers';
import { receiveForIncident } from '$lib/server/api/receive-for-incident';
import * as evidence from '$lib/server/evidence/evidence-service';
import { requireActor } from '$lib/server/http/guard';
import { idempotent } from '$lib/server/http/idempotency';
import { respond } from '$lib/server/http/respond';
import type { RequestHandler } from './$types';

export const POST = ((event) =>
	idempotent(event, async () => {
		const actor = requireActor(event);
		const received = await receiveForIncident(event);
		if (!received.ok) return respond(received);
		const { incident, uploads } = received.value;
		return respondAttached(await evidence.attach(actor, incident, uploads));
	})) satisfies RequestHandler;
