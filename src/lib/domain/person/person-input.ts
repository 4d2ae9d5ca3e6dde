import { z } from 'zod';
import { ROLES } from './person';

const email = z
	.string({ error: 'Give the e-mail address.' })
	.trim()
	.toLowerCase()
	.max(254, 'At most 254 characters.')
	// Nothing that a mail's header would read as a second address, a group or a new line (RFC 5322 section 3.4).
	.regex(
		/^[^\s\p{C}@()<>[\]:;,"\\]+@[^\s\p{C}@()<>[\]:;,"\\]+$/u,
		'Give an e-mail address, such as ada@example.org.'
	);

const name = z
	.string({ error: 'Give the name that others see.' })
	.trim()
	.min(1, 'Give the name that others see.')
	.max(120, 'At most 120 characters.')
	.regex(/^[^\p{Cc}\p{Zl}\p{Zp}]*$/u, 'A name stands on one line.');

const role = z.enum(ROLES, { error: `Give one of ${ROLES.join(', ')}.` });

export const personInput = z.object({ email, name, role });
export type PersonInput = z.infer<typeof personInput>;

// Longer than any password may be: what is typed wrongly is refused by its hash, not by its length.
const typedPassword = z.string({ error: 'Type the password.' }).min(1, 'Type the password.').max(1000);

export const signInInput = z.object({ email, password: typedPassword });
export type SignInInput = z.infer<typeof signInInput>;

export const newPasswordInput = z.object({ password: typedPassword });
export type NewPasswordInput = z.infer<typeof newPasswordInput>;

export const passwordChangeInput = z.object({
	current: z.string({ error: 'Type your present password.' }).min(1, 'Type your present password.').max(1000),
	password: typedPassword
});
export type PasswordChangeInput = z.infer<typeof passwordChangeInput>;

/** What an administrator changes of a person; what is left out stays. */
export const personPatch = z.object({
	name: name.optional(),
	role: role.optional(),
	active: z.boolean({ error: 'Give true or false.' }).optional()
});
export type PersonPatch = z.infer<typeof personPatch>;

export const invitationInput = z.object({ email, role });
export type InvitationInput = z.infer<typeof invitationInput>;

/** What somebody who was invited chooses. */
export const acceptInput = z.object({ name, password: typedPassword });
export type AcceptInput = z.infer<typeof acceptInput>;

export const resetInput = z.object({ email });
export type ResetInput = z.infer<typeof resetInput>;

/** The first administrator of an empty installation, with the code that its start printed. */
export const firstInput = z.object({
	code: z.string({ error: 'Type the code.' }).trim().min(1, 'Type the code.').max(100, 'That is too long.'),
	name,
	email,
	password: typedPassword
});
export type FirstInput = z.infer<typeof firstInput>;

export const TOKEN_MAX_DAYS = 366;

export const tokenInput = z.object({
	name: z
		.string({ error: 'Say what the token is for.' })
		.trim()
		.min(1, 'Say what the token is for.')
		.max(80, 'At most 80 characters.'),
	role,
	days: z
		.number({ error: 'Give a number of days.' })
		.int('Give whole days.')
		.min(1, 'At least one day.')
		.max(TOKEN_MAX_DAYS, `At most ${TOKEN_MAX_DAYS} days.`)
		.default(90)
});
export type TokenInput = z.infer<typeof tokenInput>;
