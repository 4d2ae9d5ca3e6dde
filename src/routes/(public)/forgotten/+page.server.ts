import { resetInput } from '$lib/domain/person/person-input';
import { readForm, readTyped } from '$lib/server/http/form';
import { failWith } from '$lib/server/http/respond';
import { setRetryAfter } from '$lib/server/http/start-session';
import * as resets from '$lib/server/people/resets-service';
import type { Actions, PageServerLoad } from './$types';

export const load = (() => ({
	title: 'Forgotten the password',
	minutes: resets.RESET_MINUTES
})) satisfies PageServerLoad;

export const actions = {
	default: async (event) => {
		const form = await event.request.formData();
		const typed = readTyped(form);
		const input = readForm(form, resetInput);
		if (!input.ok) return failWith(input.problem, typed);
		const asked = await resets.ask({ ...input.value, address: event.getClientAddress() });
		if (!asked.ok) {
			setRetryAfter(event, asked.problem.retryAfterSeconds);
			return failWith(asked.problem, typed);
		}
		return { asked: input.value.email };
	}
} satisfies Actions;
