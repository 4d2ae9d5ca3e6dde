import { z } from 'zod';
import { ROLES } from '$lib/domain/person/person';
import { invitationInput } from '$lib/domain/person/person-input';
import { peopleQuery } from '$lib/domain/person/people-query';
import { readQuery } from '$lib/server/http/api';
import { readForm, readTyped } from '$lib/server/http/form';
import { requireActor } from '$lib/server/http/guard';
import { failWith, unwrap } from '$lib/server/http/respond';
import { staysHere } from '$lib/server/mail/mail-service';
import * as invitations from '$lib/server/people/invitations-service';
import * as people from '$lib/server/people/people-service';
import type { Actions, PageServerLoad } from './$types';

export const load = (async (event) => {
	const actor = requireActor(event);
	const query = unwrap(readQuery(event.url, peopleQuery));
	const [page, unanswered] = await Promise.all([
		people.listPage(actor, query),
		invitations.listUnanswered(actor)
	]);
	return {
		page: unwrap(page),
		invitations: unwrap(unanswered),
		roles: ROLES,
		days: invitations.INVITATION_DAYS,
		mailStaysHere: staysHere()
	};
}) satisfies PageServerLoad;

const choice = z.object({ id: z.number({ error: 'Choose an invitation.' }).int().positive() });

export const actions = {
	invite: async (event) => {
		const form = await event.request.formData();
		const values = { ...readTyped(form), part: 'invite' };
		const input = readForm(form, invitationInput);
		if (!input.ok) return failWith(input.problem, values);
		const invited = await invitations.invite(requireActor(event), input.value);
		if (!invited.ok) return failWith(invited.problem, values);
		return { part: 'invite', done: `${invited.value.email} is invited.` };
	},
	resend: async (event) => {
		const values = { part: 'invitations' };
		const input = readForm(await event.request.formData(), choice);
		if (!input.ok) return failWith(input.problem, values);
		const sent = await invitations.resend(requireActor(event), input.value.id);
		if (!sent.ok) return failWith(sent.problem, values);
		return { ...values, done: `A new link for ${sent.value.email} is on its way.` };
	},
	revoke: async (event) => {
		const values = { part: 'invitations' };
		const input = readForm(await event.request.formData(), choice);
		if (!input.ok) return failWith(input.problem, values);
		const revoked = await invitations.revoke(requireActor(event), input.value.id);
		if (!revoked.ok) return failWith(revoked.problem, values);
		return { ...values, done: `The invitation of ${revoked.value.email} is taken back.` };
	}
} satisfies Actions;
