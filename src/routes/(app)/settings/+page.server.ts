import { z } from 'zod';
import { RETENTION_MAX_DAYS, RETENTION_MIN_DAYS, settingsPatch } from '$lib/domain/settings/settings';
import { countDue } from '$lib/server/evidence/retention';
import { readForm, readTyped } from '$lib/server/http/form';
import { requireActor } from '$lib/server/http/guard';
import { failWith, unwrap } from '$lib/server/http/respond';
import { staysHere } from '$lib/server/mail/mail-service';
import * as settings from '$lib/server/settings/settings-service';
import type { Actions, PageServerLoad } from './$types';

export const load = (async (event) => {
	const actor = requireActor(event);
	const current = unwrap(await settings.read(actor));
	return {
		settings: current,
		due: unwrap(await countDue(actor, current.evidenceDays)),
		minDays: RETENTION_MIN_DAYS,
		maxDays: RETENTION_MAX_DAYS,
		mailStaysHere: staysHere()
	};
}) satisfies PageServerLoad;

const retentionForm = settingsPatch.extend({
	revision: z.number({ error: 'Load the page again.' }).int().positive()
});

export const actions = {
	retention: async (event) => {
		const form = await event.request.formData();
		const values = { ...readTyped(form, ['revision']), part: 'retention' };
		const input = readForm(form, retentionForm);
		if (!input.ok) return failWith(input.problem, values);
		const { revision, ...patch } = input.value;
		const changed = await settings.update(requireActor(event), revision, patch);
		if (!changed.ok) return failWith(changed.problem, values);
		const { evidenceDays } = changed.value;
		const done =
			evidenceDays === null ? 'Files are kept for good.' : `Files are kept for ${evidenceDays} days.`;
		return { part: 'retention', done };
	}
} satisfies Actions;
