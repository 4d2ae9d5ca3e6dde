import { z } from 'zod';
import { ROLES } from './person';

const email = z
	.string({ error: 'Give the e-mail address.' })
	.trim()
	.toLowerCase()
	.max(254, 'At most 254 characters.')
	.regex(/^[^\s@]+@[^\s@]+$/, 'Give an e-mail address, such as ada@example.org.');

export const personInput = z.object({
	email,
	name: z
		.string({ error: 'Give the name that others see.' })
		.trim()
		.min(1, 'Give the name that others see.')
		.max(120, 'At most 120 characters.'),
	role: z.enum(ROLES, { error: `Give one of ${ROLES.join(', ')}.` })
});
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

export const TOKEN_MAX_DAYS = 366;

export const tokenInput = z.object({
	name: z
		.string({ error: 'Say what the token is for.' })
		.trim()
		.min(1, 'Say what the token is for.')
		.max(80, 'At most 80 characters.'),
	role: z.enum(ROLES, { error: `Give one of ${ROLES.join(', ')}.` }),
	days: z
		.number({ error: 'Give a number of days.' })
		.int('Give whole days.')
		.min(1, 'At least one day.')
		.max(TOKEN_MAX_DAYS, `At most ${TOKEN_MAX_DAYS} days.`)
		.default(90)
});
export type TokenInput = z.infer<typeof tokenInput>;
