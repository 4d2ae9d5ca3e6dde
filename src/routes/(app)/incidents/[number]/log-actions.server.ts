import { entryInput } from '$lib/domain/incident/incident-input';
import { receiveUploads } from '$lib/server/evidence/receive-uploads';
import { removeFromSpool } from '$lib/server/evidence/spool';
import * as evidence from '$lib/server/evidence/evidence-service';
import { validate } from '$lib/server/http/fields';
import { requireActor } from '$lib/server/http/guard';
import { failWith } from '$lib/server/http/respond';
import * as entries from '$lib/server/incidents/entries-service';
import { error, redirect, type RequestEvent } from '@sveltejs/kit';
import { formAction, readId, readNumber } from './run-action.server';

/** The forms that add to the log: entries and evidence. */
export const logActions = {
	addEntry: formAction('addEntry', '#log-end', async ({ actor, number, typed }) => {
		const input = validate(entryInput, { text: typed.text ?? '' });
		return input.ok ? entries.add(actor, number, input.value) : input;
	}),

	editEntry: formAction('editEntry', '#log', async ({ actor, number, typed, revision }) => {
		const input = validate(entryInput.pick({ text: true }), { text: typed.text ?? '' });
		return input.ok ? entries.update(actor, number, readId(typed.entry), revision, input.value) : input;
	}),

	// The body is streamed into the spool, never read as a whole.
	addEvidence: async (event: RequestEvent<{ number: string }>) => {
		const actor = requireActor(event);
		const number = readNumber(event.params.number);
		if (number === null) error(404, { message: `There is no incident ${event.params.number}.` });
		const form = 'addEvidence';
		const received = await receiveUploads(event, { field: 'evidence' });
		if (!received.ok) return failWith<Record<string, string>>(received.problem, { form });
		// An empty file field arrives as a file without bytes.
		const empty = received.value.uploads.filter(({ bytes }) => bytes === 0);
		await removeFromSpool(empty.map(({ path }) => path));
		const uploads = received.value.uploads.filter(({ bytes }) => bytes > 0);
		if (uploads.length === 0) {
			const problem = { code: 'invalid' as const, detail: 'Choose a file, or paste a plan or a log.' };
			return failWith<Record<string, string>>(problem, { form });
		}
		const attached = await evidence.attach(actor, number, uploads);
		if (!attached.ok) return failWith<Record<string, string>>(attached.problem, { form });
		redirect(303, `/incidents/${number}#evidence`);
	},

	removeEvidence: formAction('removeEvidence', '#evidence', ({ actor, number, typed }) =>
		evidence.remove(actor, number, readId(typed.evidence))
	)
};
