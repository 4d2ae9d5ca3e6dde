import { redirect, type RequestEvent } from '@sveltejs/kit';
import type { z } from 'zod';
import type { Actor } from '$lib/domain/person/person';
import type { Outcome } from '$lib/domain/problem';
import * as follow from '$lib/server/follow/follow-service';
import { readQuery } from '$lib/server/http/api';
import { readForm, readTyped } from '$lib/server/http/form';
import { requireActor } from '$lib/server/http/guard';
import { failWith, unwrap } from '$lib/server/http/respond';
import type { Actions, PageServerLoad } from './$types';
import { followQuery, handOverForm, skipForm, takeBackForm, tickForm } from './follow-input';
import { receiveConclusion } from './receive-conclusion.server';

type FollowEvent = RequestEvent<{ slug: string }>;

/** The attempt that the address names; an address without one leads to the runbook, where one is started. */
function readAddress(event: FollowEvent) {
	const { slug } = event.params;
	const asked = readQuery(event.url, followQuery);
	if (!asked.ok) redirect(303, `/runbooks/${slug}`);
	return { ...asked.value, place: { slug, incident: asked.value.incident, attempt: asked.value.attempt } };
}

export const load = (async (event) => {
	const actor = requireActor(event);
	const { place, step, conclude, check } = readAddress(event);
	const wanted = conclude === true ? follow.CONCLUDE : (step ?? null);
	const followed = unwrap(await follow.read(actor, place, wanted));
	// Boxes ticked by a browser without JavaScript, which asks for the statement by a form of its own.
	return { ...followed, actor, checked: check ?? [] };
}) satisfies PageServerLoad;

/** A form action: reads the form, calls the verb, goes on to the next step that is not done. */
function act<S extends z.ZodObject>(
	schema: S,
	verb: (actor: Actor, place: follow.Place, input: z.output<S>) => Promise<Outcome<unknown>>,
	goOn: (place: follow.Place) => string = toNextStep
) {
	return async (event: FollowEvent) => {
		const actor = requireActor(event);
		const { place } = readAddress(event);
		const form = await event.request.formData();
		const input = readForm(form, schema);
		if (!input.ok) return failWith(input.problem, readTyped(form));
		const done = await verb(actor, place, input.value);
		if (!done.ok) return failWith(done.problem, readTyped(form));
		redirect(303, goOn(place));
	};
}

function toNextStep({ slug, incident, attempt }: follow.Place): string {
	return `/runbooks/${slug}/follow?incident=${incident}&attempt=${attempt}`;
}

export const actions = {
	tick: act(tickForm, (actor, place, { check, ...input }) =>
		follow.tick(actor, place, { ...input, checks: check ?? [] })
	),
	skip: act(skipForm, follow.skip),
	takeBack: act(takeBackForm, follow.takeBack),
	// The plan after may be long: the body is streamed into the spool, never read as a whole.
	conclude: async (event: FollowEvent) => {
		const actor = requireActor(event);
		const { place } = readAddress(event);
		const { conclusion, typed } = await receiveConclusion(event);
		if (!conclusion.ok) return failWith(conclusion.problem, typed);
		const { note, after, ...input } = conclusion.value.input;
		const { given } = conclusion.value;
		const done = await follow.conclude(actor, place, {
			...input,
			note: note ?? null,
			after: after ?? null,
			given
		});
		if (!done.ok) return failWith(done.problem, typed);
		redirect(303, toNextStep(place));
	},
	handOver: act(
		handOverForm,
		(actor, place, { to, ...input }) => follow.handOver(actor, place, { ...input, to: to ?? null }),
		({ incident }) => `/incidents/${incident}`
	)
} satisfies Actions;
