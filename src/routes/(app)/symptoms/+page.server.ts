import { requireActor } from '$lib/server/http/guard';
import { unwrap } from '$lib/server/http/respond';
import * as symptoms from '$lib/server/symptoms/symptoms-service';
import type { PageServerLoad } from './$types';

export const load = (async (event) => {
	const page = unwrap(await symptoms.list(requireActor(event)));
	return { symptoms: page.items };
}) satisfies PageServerLoad;
