import { reviewInput } from '$lib/domain/runbook/runbook-input';
import { respondOne } from '$lib/server/api/answers';
import { readBased } from '$lib/server/api/receive-move';
import { readJson } from '$lib/server/http/api';
import { requireActor } from '$lib/server/http/guard';
import { idempotent } from '$lib/server/http/idempotency';
import { respond } from '$lib/server/http/respond';
import * as runbooks from '$lib/server/runbooks/runbooks-service';
import type { RequestHandler } from './$types';

export const POST = ((event) =>
	idempotent(event, async () => {
		const actor = requireActor(event);
		const input = await readJson(event, reviewInput);
		if (!input.ok) return respond(input);
		return respondOne(await runbooks.review(actor, event.params.slug, input.value, readBased(event)));
	})) satisfies RequestHandler;
