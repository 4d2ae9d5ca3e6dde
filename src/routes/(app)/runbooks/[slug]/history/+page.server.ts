import { pageQuery } from '$lib/domain/incident/incident-filter';
import { readQuery } from '$lib/server/http/api';
import { requireActor } from '$lib/server/http/guard';
import { unwrap } from '$lib/server/http/respond';
import * as runbooks from '$lib/server/runbooks/runbooks-service';
import type { PageServerLoad } from './$types';

export const load = (async (event) => {
	const actor = requireActor(event);
	const { slug } = event.params;
	const query = unwrap(readQuery(event.url, pageQuery));
	const [runbook, page] = await Promise.all([
		runbooks.read(actor, slug),
		runbooks.revisions(actor, slug, query)
	]);
	return { slug, title: unwrap(runbook).title, page: unwrap(page) };
}) satisfies PageServerLoad;
