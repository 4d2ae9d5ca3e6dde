import { redirect } from '@sveltejs/kit';
import { z } from 'zod';
import { readForm } from '$lib/server/http/form';
import { requireActor } from '$lib/server/http/guard';
import { failWith, unwrap } from '$lib/server/http/respond';
import * as incidents from '$lib/server/incidents/incidents-service';
import * as watch from '$lib/server/watch/watch-service';
import type { Actions, PageServerLoad } from './$types';

export const load = (async (event) => {
	const actor = requireActor(event);
	event.depends('catchwater:watch');
	return { watch: unwrap(await watch.overview(actor)) };
}) satisfies PageServerLoad;

const taking = z.object({ number: z.number().int().positive(), revision: z.number().int().positive() });

export const actions = {
	take: async (event) => {
		const actor = requireActor(event);
		const input = readForm(await event.request.formData(), taking);
		if (!input.ok) return failWith(input.problem, {});
		const { number, revision } = input.value;
		const taken = await incidents.update(actor, number, revision, { owner: actor.personId });
		if (!taken.ok) return failWith(taken.problem, {});
		redirect(303, `/incidents/${number}`);
	}
} satisfies Actions;
