import { redirect } from '@sveltejs/kit';
import { toValues } from '$lib/domain/runbook/runbook-values';
import { requireActor } from '$lib/server/http/guard';
import { unwrap } from '$lib/server/http/respond';
import * as runbooks from '$lib/server/runbooks/runbooks-service';
import {
	receiveRunbookForm,
	refuseForm,
	toPreviewInput,
	toRunbookInput
} from '../../read-runbook-form.server';
import type { Actions, PageServerLoad } from './$types';

export const load = (async (event) => {
	const actor = requireActor(event);
	const { slug } = event.params;
	const runbook = unwrap(await runbooks.readForEdit(actor, slug));
	const { revision, state, title, body, engines } = runbook;
	return {
		...{ slug, revision, state, title },
		values: toValues(runbook),
		preview: unwrap(await runbooks.preview(actor, slug, { body, engines })),
		/** The edit before this page was saved as this revision. */
		isSaved: event.url.searchParams.get('saved') === String(revision)
	};
}) satisfies PageServerLoad;

export const actions = {
	preview: async (event) => {
		const actor = requireActor(event);
		const sent = await receiveRunbookForm(event.request);
		if (!sent.ok) return refuseForm(sent.problem, null);
		const { values, revision } = sent.value;
		const input = toPreviewInput(values);
		if (!input.ok) return refuseForm(input.problem, values);
		const drawn = await runbooks.preview(actor, event.params.slug, input.value);
		return drawn.ok ? { values, revision, preview: drawn.value } : refuseForm(drawn.problem, values);
	},
	save: async (event) => {
		const actor = requireActor(event);
		const { slug } = event.params;
		const sent = await receiveRunbookForm(event.request);
		if (!sent.ok) return refuseForm(sent.problem, null);
		const { values, revision } = sent.value;
		const input = toRunbookInput(values);
		if (!input.ok) return refuseForm(input.problem, values);
		const saved = await runbooks.update(actor, slug, revision, input.value);
		if (saved.ok) redirect(303, `/runbooks/${slug}/edit?saved=${saved.value.revision}#saved`);
		return refuseForm(saved.problem, values, { slug, input: input.value });
	}
} satisfies Actions;
