import { z } from 'zod';
import { ROLES } from '$lib/domain/person/person';
import { personPatch } from '$lib/domain/person/person-input';
import { readNumber } from '$lib/server/api/params';
import { readForm, readTyped } from '$lib/server/http/form';
import { requireActor } from '$lib/server/http/guard';
import { failWith, unwrap } from '$lib/server/http/respond';
import * as people from '$lib/server/people/people-service';
import * as tokens from '$lib/server/sessions/tokens-service';
import type { Actions, PageServerLoad } from './$types';

const TOKENS_SHOWN = 200;

export const load = (async (event) => {
	const actor = requireActor(event);
	const id = unwrap(readNumber(event.params.id));
	const person = unwrap(await people.read(actor, id));
	const owned = unwrap(await tokens.listPage(actor, { person: id, limit: TOKENS_SHOWN }));
	return { person, tokens: owned.items, roles: ROLES };
}) satisfies PageServerLoad;

const revision = z.number({ error: 'Load the page again.' }).int().positive();
const details = personPatch.pick({ name: true, role: true }).extend({ revision });
const account = personPatch.pick({ active: true }).extend({ revision });
const tokenChoice = z.object({ id: z.number({ error: 'Choose a token.' }).int().positive() });

export const actions = {
	change: async (event) => {
		const form = await event.request.formData();
		const values = { ...readTyped(form, ['revision']), part: 'details' };
		const id = unwrap(readNumber(event.params.id));
		const input = readForm(form, details);
		if (!input.ok) return failWith(input.problem, values);
		const { revision: based, ...patch } = input.value;
		const changed = await people.update(requireActor(event), id, based, patch);
		if (!changed.ok) return failWith(changed.problem, values);
		return { part: 'details', done: `${changed.value.name} is ${changed.value.role} now.` };
	},
	account: async (event) => {
		const form = await event.request.formData();
		const values = { part: 'account' };
		const id = unwrap(readNumber(event.params.id));
		const input = readForm(form, account);
		if (!input.ok) return failWith(input.problem, values);
		const { revision: based, active } = input.value;
		const changed = await people.update(requireActor(event), id, based, { active });
		if (!changed.ok) return failWith(changed.problem, values);
		return {
			...values,
			done: changed.value.active ? 'The account is open again.' : 'The account is closed.'
		};
	},
	revokeToken: async (event) => {
		const values = { part: 'tokens' };
		const input = readForm(await event.request.formData(), tokenChoice);
		if (!input.ok) return failWith(input.problem, values);
		const revoked = await tokens.revoke(requireActor(event), input.value.id);
		if (!revoked.ok) return failWith(revoked.problem, values);
		return { ...values, done: 'The token is taken back.' };
	}
} satisfies Actions;
