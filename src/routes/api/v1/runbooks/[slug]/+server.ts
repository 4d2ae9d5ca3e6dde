import { runbookPatch } from '$lib/domain/runbook/runbook-input';
import { respondEdit, respondOne } from '$lib/server/api/answers';
import { requireActor } from '$lib/server/http/guard';
import * as runbooks from '$lib/server/runbooks/runbooks-service';
import type { RequestHandler } from './$types';

export const GET = (async (event) =>
	respondOne(await runbooks.read(requireActor(event), event.params.slug))) satisfies RequestHandler;

export const PATCH = ((event) =>
	respondEdit(event, runbookPatch, (actor, revision, patch) =>
		runbooks.update(actor, event.params.slug, revision, patch)
	)) satisfies RequestHandler;
