import { z } from 'zod';
import { includesRole } from '$lib/domain/person/can';
import { PASSWORD_MIN_LENGTH } from '$lib/domain/person/password-rule';
import { ROLES } from '$lib/domain/person/person';
import { passwordChangeInput, tokenInput } from '$lib/domain/person/person-input';
import { SESSION_COOKIE } from '$lib/server/http/credentials';
import { readForm, readTyped } from '$lib/server/http/form';
import { requireActor } from '$lib/server/http/guard';
import { failWith, unwrap } from '$lib/server/http/respond';
import { setSessionCookie } from '$lib/server/http/session-cookie';
import * as people from '$lib/server/people/people-service';
import * as sessions from '$lib/server/sessions/sessions-service';
import * as tokens from '$lib/server/sessions/tokens-service';
import type { Actions, PageServerLoad } from './$types';

export const load = (async (event) => {
	const actor = requireActor(event);
	const [self, signIns, ownTokens] = await Promise.all([
		people.readSelf(actor),
		sessions.list(actor, event.cookies.get(SESSION_COOKIE) ?? null),
		tokens.list(actor)
	]);
	return {
		title: 'Account',
		self: unwrap(self),
		signIns: unwrap(signIns),
		tokens: unwrap(ownTokens),
		roles: ROLES.filter((role) => includesRole(actor.role, role)),
		minLength: PASSWORD_MIN_LENGTH
	};
}) satisfies PageServerLoad;

const signInChoice = z.object({ idHash: z.string().regex(/^[0-9a-f]{64}$/, 'Choose a sign-in.') });
const tokenChoice = z.object({ id: z.number({ error: 'Choose a token.' }).int().positive() });

/** Which part of the page a form stands in: what came of it is shown there. */
type Part = 'password' | 'sign-ins' | 'tokens';

function done(part: Part, sentence: string, token: string | null = null) {
	return { part, done: sentence, token };
}

export const actions = {
	password: async (event) => {
		const actor = requireActor(event);
		const values = { part: 'password' as const };
		const input = readForm(await event.request.formData(), passwordChangeInput);
		if (!input.ok) return failWith(input.problem, values);
		const changed = await people.changePassword(actor, {
			...input.value,
			address: event.getClientAddress()
		});
		if (!changed.ok) return failWith(changed.problem, values);
		if (actor.personId !== null) {
			const userAgent = event.request.headers.get('user-agent');
			setSessionCookie(event, await sessions.create(actor.personId, userAgent));
		}
		return done('password', 'Your password is changed. Your other sign-ins have ended.');
	},
	endSignIn: async (event) => {
		const values = { part: 'sign-ins' as const };
		const input = readForm(await event.request.formData(), signInChoice);
		if (!input.ok) return failWith(input.problem, values);
		const ended = await sessions.revoke(requireActor(event), input.value.idHash);
		return ended.ok ? done('sign-ins', 'That sign-in has ended.') : failWith(ended.problem, values);
	},
	endOthers: async (event) => {
		const current = event.cookies.get(SESSION_COOKIE) ?? null;
		const ended = await sessions.revokeOthers(requireActor(event), current);
		if (!ended.ok) return failWith(ended.problem, { part: 'sign-ins' as const });
		return done('sign-ins', 'All your other sign-ins have ended.');
	},
	createToken: async (event) => {
		const actor = requireActor(event);
		const form = await event.request.formData();
		const values = { part: 'tokens' as const, ...readTyped(form) };
		const input = readForm(form, tokenInput);
		if (!input.ok) return failWith(input.problem, values);
		const created = await tokens.create(actor, { ...input.value, personId: actor.personId ?? 0 });
		if (!created.ok) return failWith(created.problem, values);
		return done('tokens', `The token "${input.value.name}" is made.`, created.value.token);
	},
	revokeToken: async (event) => {
		const values = { part: 'tokens' as const };
		const input = readForm(await event.request.formData(), tokenChoice);
		if (!input.ok) return failWith(input.problem, values);
		const revoked = await tokens.revoke(requireActor(event), input.value.id);
		return revoked.ok ? done('tokens', 'The token is taken back.') : failWith(revoked.problem, values);
	}
} satisfies Actions;
