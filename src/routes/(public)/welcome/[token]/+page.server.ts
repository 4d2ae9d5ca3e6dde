import { redirect } from '@sveltejs/kit';
import { PASSWORD_MIN_LENGTH } from '$lib/domain/person/password-rule';
import { newPasswordInput } from '$lib/domain/person/person-input';
import { readForm } from '$lib/server/http/form';
import { failWith, unwrap } from '$lib/server/http/respond';
import { startSession } from '$lib/server/http/start-session';
import * as people from '$lib/server/people/people-service';
import type { Actions, PageServerLoad } from './$types';

export const load = (async (event) => {
	const { name, email } = unwrap(await people.readLink(event.params.token));
	return { title: 'Welcome', name, email, minLength: PASSWORD_MIN_LENGTH };
}) satisfies PageServerLoad;

export const actions = {
	default: async (event) => {
		const input = readForm(await event.request.formData(), newPasswordInput);
		if (!input.ok) return failWith(input.problem, {});
		const person = await people.setPasswordByLink(event.params.token, input.value.password);
		if (!person.ok) return failWith(person.problem, {});
		await startSession(event, person.value.id);
		redirect(303, '/');
	}
} satisfies Actions;
