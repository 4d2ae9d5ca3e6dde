import { tokenInput } from '$lib/domain/person/person-input';
import { tokenQuery } from '$lib/domain/person/people-query';
import { ok } from '$lib/domain/problem';
import { respondPage } from '$lib/server/api/answers';
import { readJson, readQuery } from '$lib/server/http/api';
import { requireActor } from '$lib/server/http/guard';
import { idempotent } from '$lib/server/http/idempotency';
import { respond } from '$lib/server/http/respond';
import * as tokens from '$lib/server/sessions/tokens-service';
import type { RequestHandler } from './$types';

export const GET = (async (event) => {
	const actor = requireActor(event);
	const query = readQuery(event.url, tokenQuery);
	return query.ok ? respondPage(event, await tokens.listPage(actor, query.value)) : respond(query);
}) satisfies RequestHandler;

/** A token is kept as its hash alone, in an answer held for replay as well. */
function withoutToken(body: string): string {
	const made: unknown = JSON.parse(body);
	return JSON.stringify(typeof made === 'object' ? { ...made, token: null } : null);
}

export const POST = ((event) =>
	idempotent(
		event,
		async () => {
			const actor = requireActor(event);
			const input = await readJson(event, tokenInput);
			if (!input.ok) return respond(input);
			const made = await tokens.create(actor, { ...input.value, personId: actor.personId ?? 0 });
			if (!made.ok) return respond(made);
			const { token, record } = made.value;
			return respond(ok({ ...record, token }), {
				status: 201,
				headers: { location: `/api/v1/tokens/${record.id}` }
			});
		},
		withoutToken
	)) satisfies RequestHandler;
