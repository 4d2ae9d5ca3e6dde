import { redirect, type RequestEvent } from '@sveltejs/kit';
import type { Actor } from '$lib/domain/person/person';
import { fail, type Outcome } from '$lib/domain/problem';
import { readTyped } from '$lib/server/http/form';
import { requireActor } from '$lib/server/http/guard';
import { failWith } from '$lib/server/http/respond';

/** What one form of the page is about. */
export interface ActionContext {
	actor: Actor;
	number: number;
	/** The fields as they were typed. */
	typed: Record<string, string>;
	/** The revision that the form was drawn from. */
	revision: number;
}

/** The number in the address; null: it is none, so there is no such incident. */
export function readNumber(text: string | undefined): number | null {
	return text !== undefined && /^[1-9]\d{0,14}$/.test(text) ? Number(text) : null;
}

type Event = RequestEvent<{ number: string }>;

/**
 * Runs one form of the page: on success back to the page, at `anchor`; on a Problem the form is shown again with
 * what was typed, and `form` says which one it was. What stands there now comes from the page's own load.
 */
export function formAction(
	form: string,
	anchor: string,
	run: (context: ActionContext) => Promise<Outcome<unknown>>
) {
	return async (event: Event) => {
		const actor = requireActor(event);
		const typed = readTyped(await event.request.formData());
		const number = readNumber(event.params.number);
		const outcome =
			number === null
				? fail('not_found', `There is no incident ${event.params.number}.`)
				: await run({ actor, number, typed, revision: Number(typed.revision ?? 0) });
		if (!outcome.ok) return failWith({ ...outcome.problem, current: undefined }, { ...typed, form });
		redirect(303, `/incidents/${number}${anchor}`);
	};
}

/** An id that a form carries. */
export function readId(text: string | undefined): number {
	return readNumber(text) ?? 0;
}
