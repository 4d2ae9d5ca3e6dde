import { precedentQuery } from '$lib/domain/precedent/precedent-input';
import { ok } from '$lib/domain/problem';
import { receiveDraft } from '$lib/server/api/receive-draft';
import { readOnce } from '$lib/server/evidence/read-once';
import { readQuery } from '$lib/server/http/api';
import { requireActor } from '$lib/server/http/guard';
import { idempotent } from '$lib/server/http/idempotency';
import { respond, respondItems } from '$lib/server/http/respond';
import * as precedents from '$lib/server/precedents/precedents-service';
import type { RequestHandler } from './$types';

export const POST = ((event) =>
	idempotent(event, async () => {
		const actor = requireActor(event);
		const query = readQuery(event.url, precedentQuery);
		if (!query.ok) return respond(query);
		const received = await receiveDraft(event);
		if (!received.ok) return respond(received);
		const { draft, uploads } = received.value;
		const read = uploads.length === 0 ? ok([]) : await readOnce(actor, uploads);
		if (!read.ok) return respond(read);
		return respondItems(
			await precedents.forDraft(actor, { ...draft, readings: read.value }, query.value.limit)
		);
	})) satisfies RequestHandler;
