import { error, redirect } from '@sveltejs/kit';
import { PASSWORD_MIN_LENGTH } from '$lib/domain/person/password-rule';
import { firstInput } from '$lib/domain/person/person-input';
import { readForm, readTyped } from '$lib/server/http/form';
import { failWith } from '$lib/server/http/respond';
import { setRetryAfter, startSession } from '$lib/server/http/start-session';
import { isEmpty, makeFirst } from '$lib/server/people/first-administrator';
import type { Actions, PageServerLoad } from './$types';

export const load = (async () => {
	if (!(await isEmpty())) {
		error(404, { message: 'Somebody is here already: an administrator invites you.', code: 'not_found' });
	}
	return { title: 'The first administrator', minLength: PASSWORD_MIN_LENGTH };
}) satisfies PageServerLoad;

export const actions = {
	default: async (event) => {
		const form = await event.request.formData();
		const typed = readTyped(form, ['password', 'code']);
		const input = readForm(form, firstInput);
		if (!input.ok) return failWith(input.problem, typed);
		const person = await makeFirst({ ...input.value, address: event.getClientAddress() });
		if (!person.ok) {
			setRetryAfter(event, person.problem.retryAfterSeconds);
			return failWith(person.problem, typed);
		}
		await startSession(event, person.value.id);
		redirect(303, '/people');
	}
} satisfies Actions;
