import { settingsPatch } from '$lib/domain/settings/settings';
import { respondEdit, respondOne } from '$lib/server/api/answers';
import { requireActor } from '$lib/server/http/guard';
import * as settings from '$lib/server/settings/settings-service';
import type { RequestHandler } from './$types';

export const GET = (async (event) =>
	respondOne(await settings.read(requireActor(event)))) satisfies RequestHandler;

export const PATCH = ((event) =>
	respondEdit(event, settingsPatch, (actor, revision, patch) =>
		settings.update(actor, revision, patch)
	)) satisfies RequestHandler;
