import { redirect } from '@sveltejs/kit';
import { PASSWORD_MIN_LENGTH } from '$lib/domain/person/password-rule';
import { acceptInput } from '$lib/domain/person/person-input';
import { readForm, readTyped } from '$lib/server/http/form';
import { failWith, unwrap } from '$lib/server/http/respond';
import { startSession } from '$lib/server/http/start-session';
import * as invitations from '$lib/server/people/invitations-service';
import type { Actions, PageServerLoad } from './$types';

export const load = (async (event) => {
	const { email, role } = unwrap(await invitations.readLink(event.params.token));
	return { title: 'Welcome', email, role, minLength: PASSWORD_MIN_LENGTH };
}) satisfies PageServerLoad;

export const actions = {
	default: async (event) => {
		const form = await event.request.formData();
		const typed = readTyped(form, ['password']);
		const input = readForm(form, acceptInput);
		if (!input.ok) return failWith(input.problem, typed);
		const person = await invitations.accept(event.params.token, input.value);
		if (!person.ok) return failWith(person.problem, typed);
		await startSession(event, person.value.id);
		redirect(303, '/');
	}
} satisfies Actions;
