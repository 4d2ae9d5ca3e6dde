import { precedentQuery } from '$lib/domain/precedent/precedent-input';
import { readNumber } from '$lib/server/api/params';
import { readQuery } from '$lib/server/http/api';
import { requireActor } from '$lib/server/http/guard';
import { respond, respondItems } from '$lib/server/http/respond';
import * as precedents from '$lib/server/precedents/precedents-service';
import type { RequestHandler } from './$types';

export const GET = (async (event) => {
	const actor = requireActor(event);
	const number = readNumber(event.params.number);
	if (!number.ok) return respond(number);
	const query = readQuery(event.url, precedentQuery);
	if (!query.ok) return respond(query);
	return respondItems(await precedents.forIncident(actor, number.value, query.value.limit));
}) satisfies RequestHandler;
