import { redirect } from '@sveltejs/kit';
import { signInInput } from '$lib/domain/person/person-input';
import { readForm, readTyped } from '$lib/server/http/form';
import { readNextPath } from '$lib/server/http/next-path';
import { failWith } from '$lib/server/http/respond';
import { setRetryAfter, startSession } from '$lib/server/http/start-session';
import { isEmpty } from '$lib/server/people/first-administrator';
import * as people from '$lib/server/people/people-service';
import type { Actions, PageServerLoad } from './$types';

export const load = (async (event) => {
	if (event.locals.actor) redirect(303, readNextPath(event.url));
	if (await isEmpty()) redirect(303, '/first');
	return { title: 'Sign in' };
}) satisfies PageServerLoad;

export const actions = {
	default: async (event) => {
		const form = await event.request.formData();
		const typed = readTyped(form, ['password']);
		const input = readForm(form, signInInput);
		if (!input.ok) return failWith(input.problem, typed);
		const person = await people.signIn({ ...input.value, address: event.getClientAddress() });
		if (!person.ok) {
			setRetryAfter(event, person.problem.retryAfterSeconds);
			return failWith(person.problem, typed);
		}
		await startSession(event, person.value.id);
		redirect(303, readNextPath(event.url));
	}
} satisfies Actions;
