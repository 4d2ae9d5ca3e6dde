import { redirect } from '@sveltejs/kit';
import { z } from 'zod';
import { incidentFilter } from '$lib/domain/incident/incident-filter';
import { readForm } from '$lib/server/http/form';
import { requireActor } from '$lib/server/http/guard';
import { failWith, unwrap } from '$lib/server/http/respond';
import * as attempts from '$lib/server/incidents/attempts-service';
import * as incidents from '$lib/server/incidents/incidents-service';
import * as runbooks from '$lib/server/runbooks/runbooks-service';
import type { Actions, PageServerLoad } from './$types';
import { reviewActions } from './review-actions.server';

/** Incidents that an attempt may be started for from here. */
const MOST_INCIDENTS = 100;

export const load = (async (event) => {
	const actor = requireActor(event);
	const filter = incidentFilter.parse({
		state: ['open', 'contained'],
		sort: 'severity',
		limit: MOST_INCIDENTS
	});
	const { slug } = event.params;
	const asked = event.url.searchParams.get('revision') ?? '';
	const revision = /^[1-9]\d{0,8}$/.test(asked) ? Number(asked) : null;
	const [page, work, open] = await Promise.all([
		runbooks.readPage(actor, slug, revision),
		runbooks.readWork(actor, slug),
		incidents.list(actor, filter)
	]);
	return {
		...unwrap(page),
		work: unwrap(work),
		open: unwrap(open).items.map(({ number, title, service }) => ({ number, title, service }))
	};
}) satisfies PageServerLoad;

const starting = z.object({
	incident: z.number({ error: 'Choose the incident that it is for.' }).int().positive()
});

export const actions = {
	...reviewActions,
	start: async (event) => {
		const actor = requireActor(event);
		const { slug } = event.params;
		const input = readForm(await event.request.formData(), starting);
		if (!input.ok) return failWith(input.problem, { form: 'start', note: '' });
		const { incident } = input.value;
		const started = await attempts.start(actor, incident, { runbook: slug });
		if (!started.ok) return failWith(started.problem, { form: 'start', note: '' });
		redirect(303, `/runbooks/${slug}/follow?incident=${incident}&attempt=${started.value.id}`);
	}
} satisfies Actions;
