import type { Role } from '$lib/domain/person/person';
import { config } from '../config';
import { toHeaderText } from './compose-mail';

/** What is written to somebody. */
export interface Letter {
	subject: string;
	text: string;
}

/** A moment as a letter says it, "8 December 2026, 07:40 UTC": its reader's zone isn't known. */
function writeMoment(iso: string): string {
	const date = new Date(iso).toLocaleDateString('en-GB', {
		timeZone: 'UTC',
		day: 'numeric',
		month: 'long',
		year: 'numeric'
	});
	return `${date}, ${iso.slice(11, 16)} UTC`;
}

/** Addresses come from ORIGIN alone, never from what a request says of its host. */
function addressOf(path: string): string {
	return `${config().origin}${path}`;
}

/** Asks somebody to join. */
export function inviteLetter(invited: { by: string; role: Role; expiresAt: string; secret: string }): Letter {
	return {
		subject: 'Your invitation to Catchwater',
		text: `Hello,

${toHeaderText(invited.by)} invites you to Catchwater at ${addressOf('')}, where the team keeps
what it learns from slow statements and overflowing memory.
Your role there: ${invited.role}.

Choose your name and your password here:

${addressOf(`/invitation/${invited.secret}`)}

The link opens once, until ${writeMoment(invited.expiresAt)}.
If you do not know what this is about, do nothing.
`
	};
}

/** Lets somebody choose a new password. */
export function resetLetter(reset: { name: string; expiresAt: string; secret: string }): Letter {
	return {
		subject: 'A new password for Catchwater',
		text: `Hello ${toHeaderText(reset.name)},

somebody, probably you, asked for a new password at ${addressOf('')}.
Choose it here:

${addressOf(`/reset/${reset.secret}`)}

The link opens once, until ${writeMoment(reset.expiresAt)}.
If it was not you, do nothing: your password stays as it is.
`
	};
}

/** Tells somebody that their password is another one now (OWASP ASVS v5.0.0-6.3.7). */
export function passwordChangedLetter(changed: { name: string; at: string }): Letter {
	return {
		subject: 'Your password for Catchwater was changed',
		text: `Hello ${toHeaderText(changed.name)},

your password at ${addressOf('')} was changed on ${writeMoment(changed.at)}.
All your sign-ins from before have ended.

If it was not you, choose another one at ${addressOf('/forgotten')}
and tell an administrator.
`
	};
}
