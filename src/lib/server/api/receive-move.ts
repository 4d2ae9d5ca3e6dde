import type { RequestEvent } from '@sveltejs/kit';
import { moveInput } from '$lib/domain/runbook/runbook-input';
import type { Runbook } from '$lib/domain/runbook/runbook';
import type { Actor } from '$lib/domain/person/person';
import { ok, type Outcome } from '$lib/domain/problem';
import { readJson, requireIfMatch } from '../http/api';
import { requireActor } from '../http/guard';
import { idempotent } from '../http/idempotency';
import { respond } from '../http/respond';
import { respondOne } from './answers';

/** A revision that nothing ever has: the move is stale, and the answer says what stands there. */
const NO_REVISION = -1;

/** The revision that a move is based on, where the caller says so by If-Match; null: they did not. */
export function readBased(event: Pick<RequestEvent, 'request'>): number | null {
	if (!event.request.headers.has('if-match')) return null;
	const based = requireIfMatch(event);
	return based.ok ? based.value : NO_REVISION;
}

/** A note in the body, or no body at all. */
async function readNote(event: RequestEvent): Promise<Outcome<string | null>> {
	if (event.request.body === null && !event.request.headers.has('content-type')) return ok(null);
	const input = await readJson(event, moveInput);
	return input.ok ? ok(input.value.note ?? null) : input;
}

/** A move of a runbook that needs no more than a note. */
export function respondMove(
	event: RequestEvent,
	run: (actor: Actor, note: string | null, based: number | null) => Promise<Outcome<Runbook>>
): Promise<Response> {
	return idempotent(event, async (event) => {
		const note = await readNote(event);
		if (!note.ok) return respond(note);
		return respondOne(await run(requireActor(event), note.value, readBased(event)));
	});
}
