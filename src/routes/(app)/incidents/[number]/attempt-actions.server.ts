import { attemptInput, attemptPatch } from '$lib/domain/incident/incident-input';
import { toFields, validate } from '$lib/server/http/fields';
import { requireActor } from '$lib/server/http/guard';
import { failWith } from '$lib/server/http/respond';
import * as attempts from '$lib/server/incidents/attempts-service';
import { redirect, type RequestEvent } from '@sveltejs/kit';
import { formAction, readId, readNumber } from './run-action.server';

const stepPatch = attemptPatch.pick({ steps: true });

/** The forms of what is tried: start, tick, skip, record. */
export const attemptActions = {
	startAttempt: async (event: RequestEvent<{ number: string }>) => {
		const actor = requireActor(event);
		const form = await event.request.formData();
		const textsOf = (name: string) => form.getAll(name).filter((value) => typeof value === 'string');
		const typed = { form: 'startAttempt', title: textsOf('title')[0] ?? '' };
		const input = validate(attemptInput, toFields(attemptInput.shape, textsOf));
		const number = readNumber(event.params.number) ?? 0;
		const started = input.ok ? await attempts.start(actor, number, input.value) : input;
		if (!started.ok) return failWith<Record<string, string>>(started.problem, typed);
		const { id, runbook } = started.value;
		// A runbook is followed step by step on its own page; a free action stays here.
		redirect(
			303,
			runbook === null
				? `/incidents/${number}#attempts`
				: `/runbooks/${runbook}/follow?incident=${number}&attempt=${id}`
		);
	},

	stepAttempt: formAction('stepAttempt', '#attempts', async ({ actor, number, typed, revision }) => {
		const step = readId(typed.step);
		const skipped = typed.skipped?.trim();
		const change =
			typed.do === 'skip' ? { number: step, skipped } : { number: step, ticked: typed.do === 'tick' };
		const patch = validate(stepPatch, { steps: [change] });
		return patch.ok ? attempts.update(actor, number, readId(typed.attempt), revision, patch.value) : patch;
	}),

	recordAttempt: formAction('recordAttempt', '#attempts', async ({ actor, number, typed, revision }) => {
		const textsOf = (name: string) => (typed[name] === undefined ? [] : [typed[name]]);
		const patch = validate(attemptPatch, toFields(attemptPatch.shape, textsOf));
		return patch.ok ? attempts.update(actor, number, readId(typed.attempt), revision, patch.value) : patch;
	})
};
