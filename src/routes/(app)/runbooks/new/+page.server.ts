import { redirect } from '@sveltejs/kit';
import { ENGINES } from '$lib/domain/reading/reading';
import { RUNBOOK_TEMPLATE } from '$lib/domain/runbook/template';
import type { RunbookValues } from '$lib/domain/runbook/runbook-values';
import { SYMPTOM_IDS } from '$lib/domain/symptom/symptom';
import { requireActor } from '$lib/server/http/guard';
import { unwrap } from '$lib/server/http/respond';
import * as runbooks from '$lib/server/runbooks/runbooks-service';
import { receiveRunbookForm, refuseForm, toPreviewInput, toRunbookInput } from '../read-runbook-form.server';
import type { Actions, PageServerLoad } from './$types';

const REVIEW_EVERY_DAYS = '180';

export const load = (async (event) => {
	const actor = requireActor(event);
	const asked = (name: string, known: readonly string[]) =>
		event.url.searchParams.getAll(name).filter((value) => known.includes(value));
	const engines = asked('engine', ENGINES);
	const values: RunbookValues = {
		title: '',
		summary: '',
		body: RUNBOOK_TEMPLATE,
		engines: engines.length > 0 ? engines : ['postgresql'],
		symptoms: asked('symptom', SYMPTOM_IDS),
		reviewEveryDays: REVIEW_EVERY_DAYS,
		note: ''
	};
	const input = unwrap(toPreviewInput(values));
	return { values, preview: unwrap(await runbooks.preview(actor, null, input)) };
}) satisfies PageServerLoad;

export const actions = {
	preview: async (event) => {
		const actor = requireActor(event);
		const sent = await receiveRunbookForm(event.request);
		if (!sent.ok) return refuseForm(sent.problem, null);
		const { values } = sent.value;
		const input = toPreviewInput(values);
		if (!input.ok) return refuseForm(input.problem, values);
		const drawn = await runbooks.preview(actor, null, input.value);
		return drawn.ok ? { values, preview: drawn.value } : refuseForm(drawn.problem, values);
	},
	save: async (event) => {
		const actor = requireActor(event);
		const sent = await receiveRunbookForm(event.request);
		if (!sent.ok) return refuseForm(sent.problem, null);
		const { values } = sent.value;
		const input = toRunbookInput(values);
		if (!input.ok) return refuseForm(input.problem, values);
		const { note: _note, ...runbook } = input.value;
		const made = await runbooks.create(actor, runbook);
		if (!made.ok) return refuseForm(made.problem, values);
		redirect(303, `/runbooks/${made.value.slug}/edit?saved=1#saved`);
	}
} satisfies Actions;
