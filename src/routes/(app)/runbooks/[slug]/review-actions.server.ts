import { redirect, type RequestEvent } from '@sveltejs/kit';
import type { Actor } from '$lib/domain/person/person';
import type { Outcome } from '$lib/domain/problem';
import { receiveForm, readTyped } from '$lib/server/http/form';
import { requireActor } from '$lib/server/http/guard';
import { failWith } from '$lib/server/http/respond';
import * as runbooks from '$lib/server/runbooks/runbooks-service';

type Event = RequestEvent<{ slug: string }>;

/** What a button of the page sends: a note, and the revision that the page was drawn from. */
interface Sent {
	slug: string;
	note: string | null;
	based: number | null;
}

const MAX_NOTE = 2000;

/** Runs one button of the page: back to the page, or why it was not done with the note that was typed. */
function reviewAction(form: string, run: (actor: Actor, sent: Sent) => Promise<Outcome<unknown>>) {
	return async (event: Event) => {
		const actor = requireActor(event);
		const received = await receiveForm(event.request);
		if (!received.ok) return failWith(received.problem, { form, note: '' });
		const typed = readTyped(received.value);
		const note = (typed.note ?? '').trim().slice(0, MAX_NOTE);
		const based = /^\d{1,9}$/.test(typed.revision ?? '') ? Number(typed.revision) : null;
		const outcome = await run(actor, { slug: event.params.slug, note: note || null, based });
		if (!outcome.ok) return failWith({ ...outcome.problem, current: undefined }, { form, note });
		redirect(303, `/runbooks/${event.params.slug}`);
	};
}

/** The moves of a runbook, as buttons of its page. */
export const reviewActions = {
	submit: reviewAction('submit', (actor, { slug, note, based }) =>
		runbooks.review(actor, slug, { action: 'submit', note }, based)
	),
	return: reviewAction('return', (actor, { slug, note, based }) =>
		runbooks.review(actor, slug, { action: 'return', note }, based)
	),
	approve: reviewAction('approve', (actor, { slug, note, based }) =>
		runbooks.review(actor, slug, { action: 'approve', note }, based)
	),
	publish: reviewAction('publish', (actor, { slug, note, based }) =>
		runbooks.publish(actor, slug, note, based)
	),
	retire: reviewAction('retire', (actor, { slug, note, based }) => runbooks.retire(actor, slug, note, based))
};
