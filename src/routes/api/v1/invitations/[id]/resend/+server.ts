import { respondOne } from '$lib/server/api/answers';
import { readNumber } from '$lib/server/api/params';
import { requireActor } from '$lib/server/http/guard';
import { idempotent } from '$lib/server/http/idempotency';
import { respond } from '$lib/server/http/respond';
import * as invitations from '$lib/server/people/invitations-service';
import type { RequestHandler } from './$types';

export const POST = ((event) =>
	idempotent(event, async () => {
		const actor = requireActor(event);
		const id = readNumber(event.params.id);
		return id.ok ? respondOne(await invitations.resend(actor, id.value)) : respond(id);
	})) satisfies RequestHandler;
