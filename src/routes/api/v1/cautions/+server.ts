import { cautionInput } from '$lib/domain/caution/caution-input';
import * as cautions from '$lib/server/cautions/cautions-service';
import { readJson } from '$lib/server/http/api';
import { requireActor } from '$lib/server/http/guard';
import { idempotent } from '$lib/server/http/idempotency';
import { respond } from '$lib/server/http/respond';
import type { RequestHandler } from './$types';

export const POST = ((event) =>
	idempotent(event, async () => {
		const actor = requireActor(event);
		const input = await readJson(event, cautionInput);
		return respond(input.ok ? await cautions.read(actor, input.value) : input);
	})) satisfies RequestHandler;
