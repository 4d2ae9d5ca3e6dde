import { pageQuery } from '$lib/domain/incident/incident-filter';
import { attemptInput } from '$lib/domain/incident/incident-input';
import { respondMade, respondPage } from '$lib/server/api/answers';
import { readNumber } from '$lib/server/api/params';
import { readJson, readQuery } from '$lib/server/http/api';
import { requireActor } from '$lib/server/http/guard';
import { idempotent } from '$lib/server/http/idempotency';
import { respond } from '$lib/server/http/respond';
import * as attempts from '$lib/server/incidents/attempts-service';
import type { RequestHandler } from './$types';

export const GET = (async (event) => {
	const actor = requireActor(event);
	const number = readNumber(event.params.number);
	if (!number.ok) return respond(number);
	const query = readQuery(event.url, pageQuery);
	return query.ok
		? respondPage(event, await attempts.list(actor, number.value, query.value))
		: respond(query);
}) satisfies RequestHandler;

export const POST = ((event) =>
	idempotent(event, async () => {
		const actor = requireActor(event);
		const number = readNumber(event.params.number);
		if (!number.ok) return respond(number);
		const input = await readJson(event, attemptInput);
		if (!input.ok) return respond(input);
		return respondMade(
			await attempts.start(actor, number.value, input.value),
			({ id }) => `/api/v1/incidents/${number.value}/attempts/${id}`
		);
	})) satisfies RequestHandler;
