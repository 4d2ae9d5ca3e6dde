import { redirect } from '@sveltejs/kit';
import { compareQuery } from '$lib/domain/runbook/runbook-input';
import type { RunbookRevision } from '$lib/domain/runbook/revision';
import { readQuery } from '$lib/server/http/api';
import { requireActor } from '$lib/server/http/guard';
import { unwrap } from '$lib/server/http/respond';
import * as runbooks from '$lib/server/runbooks/runbooks-service';
import type { PageServerLoad } from './$types';

export const load = (async (event) => {
	const actor = requireActor(event);
	const { slug } = event.params;
	const query = readQuery(event.url, compareQuery);
	// An address without two revisions leads to where they are chosen.
	if (!query.ok) redirect(303, `/runbooks/${slug}/history`);
	const [comparison, from, to] = await Promise.all([
		runbooks.compare(actor, slug, query.value),
		runbooks.revision(actor, slug, query.value.from),
		runbooks.revision(actor, slug, query.value.to)
	]);
	const sideOf = ({ revision, state, title, createdBy, createdAt, note }: RunbookRevision) => ({
		...{ revision, state, title, createdBy, createdAt, note }
	});
	return { comparison: unwrap(comparison), from: sideOf(unwrap(from)), to: sideOf(unwrap(to)) };
}) satisfies PageServerLoad;
