import { redirect } from '@sveltejs/kit';
import { signInInput } from '$lib/domain/person/person-input';
import { SESSION_COOKIE } from '$lib/server/http/credentials';
import { readForm, readTyped } from '$lib/server/http/form';
import { readNextPath } from '$lib/server/http/next-path';
import { failWith } from '$lib/server/http/respond';
import { setSessionCookie } from '$lib/server/http/session-cookie';
import * as people from '$lib/server/people/people-service';
import * as sessions from '$lib/server/sessions/sessions-service';
import type { Actions, PageServerLoad } from './$types';

export const load = ((event) => {
	if (event.locals.actor) redirect(303, readNextPath(event.url));
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
			const { retryAfterSeconds } = person.problem;
			if (retryAfterSeconds !== undefined) event.setHeaders({ 'retry-after': String(retryAfterSeconds) });
			return failWith(person.problem, typed);
		}
		// A sign-in always gets a new session; the one before it ends.
		const before = event.cookies.get(SESSION_COOKIE);
		if (before !== undefined) await sessions.end(before);
		setSessionCookie(event, await sessions.create(person.value.id, event.request.headers.get('user-agent')));
		redirect(303, readNextPath(event.url));
	}
} satisfies Actions;
