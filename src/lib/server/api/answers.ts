import type { RequestEvent } from '@sveltejs/kit';
import type { z } from 'zod';
import type { Page } from '$lib/domain/page';
import type { Actor } from '$lib/domain/person/person';
import type { Evidence } from '$lib/domain/incident/incident';
import { ok, type Outcome } from '$lib/domain/problem';
import { readJson, requireIfMatch } from '../http/api';
import { requireActor } from '../http/guard';
import { respond } from '../http/respond';

/** A page of a list, with the address of the next one (RFC 8288), relative to this one. */
export function respondPage<T>(event: Pick<RequestEvent, 'url'>, outcome: Outcome<Page<T>>): Response {
	if (!outcome.ok || outcome.value.next === null) return respond(outcome);
	const query = new URLSearchParams(event.url.searchParams);
	query.set('cursor', outcome.value.next);
	return respond(outcome, { headers: { link: `<${event.url.pathname}?${query}>; rel="next"` } });
}

/** Something single that was read or changed; its revision as ETag. */
export function respondOne<T extends { revision: number }>(outcome: Outcome<T>): Response {
	return outcome.ok ? respond(outcome, { etag: outcome.value.revision }) : respond(outcome);
}

/** Something that was made: 201, where it is, and its revision as ETag. */
export function respondMade<T extends { revision: number }>(
	outcome: Outcome<T>,
	locate: (made: T) => string
): Response {
	if (!outcome.ok) return respond(outcome);
	const { value } = outcome;
	return respond(outcome, { status: 201, headers: { location: locate(value) }, etag: value.revision });
}

/** A revision that nothing ever has: the edit is stale, and the answer says what stands there. */
const NO_REVISION = -1;

/**
 * An edit: the revision out of If-Match, the merge patch out of the body, one verb, its answer. A tag that is
 * no revision of ours meets the service as one, so that `current` comes with the refusal.
 */
export async function respondEdit<S extends z.ZodType, T extends { revision: number }>(
	event: RequestEvent,
	schema: S,
	run: (actor: Actor, revision: number, patch: z.output<S>) => Promise<Outcome<T>>
): Promise<Response> {
	const actor = requireActor(event);
	const based = requireIfMatch(event);
	if (!based.ok && based.problem.code !== 'stale') return respond(based);
	const patch = await readJson(event, schema);
	if (!patch.ok) return respond(patch);
	return respondOne(await run(actor, based.ok ? based.value : NO_REVISION, patch.value));
}

/** Evidence that was attached: 201, and where its first file is to be had once it is read. */
export function respondAttached(outcome: Outcome<Evidence[]>): Response {
	if (!outcome.ok) return respond(outcome);
	const first = outcome.value.find(({ sha256 }) => sha256 !== '');
	const headers = first === undefined ? undefined : { location: `/api/v1/evidence/${first.sha256}` };
	return respond(ok({ items: outcome.value }), {
		status: 201,
		...(headers === undefined ? {} : { headers })
	});
}
