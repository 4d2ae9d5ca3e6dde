import { HIT_KINDS } from '$lib/domain/search/search-hit';
import { requireActor } from '$lib/server/http/guard';
import { unwrap } from '$lib/server/http/respond';
import * as search from '$lib/server/search/search-service';
import type { PageServerLoad } from './$types';

const LIMIT = 50;

export const load = (async (event) => {
	const actor = requireActor(event);
	const words = (event.url.searchParams.get('q') ?? '').trim();
	const asked = event.url.searchParams.get('kind');
	const kind = HIT_KINDS.find((known) => known === asked) ?? null;
	const hits =
		words === '' ? [] : unwrap(await search.find(actor, { q: words, kind: kind ?? undefined, limit: LIMIT }));
	return { title: words === '' ? 'Search' : `Search: ${words}`, words, kind, hits, limit: LIMIT };
}) satisfies PageServerLoad;
