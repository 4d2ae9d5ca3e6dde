import { SYSTEM, type Person } from '$lib/domain/person/person';
import type { ResetInput } from '$lib/domain/person/person-input';
import { fail, ok, type Outcome } from '$lib/domain/problem';
import * as audit from '../audit/audit-service';
import { write } from '../db/transaction';
import { log } from '../log';
import { passwordChangedLetter, resetLetter } from '../mail/letters';
import { queueMail } from '../mail/mail-service';
import { hashSecret, makeSecret } from '../secrets';
import { deleteSessionsOf } from '../sessions/session-store';
import { hashPassword } from './password';
import { findNewPasswordFault } from './password-fault';
import { deleteLinksOf, findByEmail, updatePerson, type PersonRecord } from './people-store';
import { toActor } from './person-detail';
import * as store from './reset-store';
import { countReset } from './sign-in-limits';

const MINUTE_MS = 60_000;
/** How long a mailed link opens. */
export const RESET_MINUTES = 60;
/** Links for one person within that time. More asked for are not mailed: those before still open. */
const LINKS_AT_ONCE = 3;
const DAY_MS = 24 * 60 * MINUTE_MS;

const UNKNOWN_LINK = fail('not_found', 'This link was used already or has run out. Ask for a new one.');

async function mailLink(email: string): Promise<void> {
	const person = await findByEmail(email);
	if (!person || person.deactivatedAt !== null) return;
	const secret = makeSecret();
	const now = Date.now();
	const createdAt = new Date(now).toISOString();
	const expiresAt = new Date(now + RESET_MINUTES * MINUTE_MS).toISOString();
	await write(async (t) => {
		const since = new Date(now - RESET_MINUTES * MINUTE_MS).toISOString();
		if ((await store.countSince(person.id, since)) >= LINKS_AT_ONCE) return;
		await store.insertReset({ tokenHash: hashSecret(secret), personId: person.id, createdAt, expiresAt }, t);
		await queueMail(person.email, resetLetter({ name: person.name, expiresAt, secret }), t);
		await audit.record(SYSTEM, 'person.reset-mailed', `person:${person.id}`, {}, t);
	});
}

/** The asking under way; what a stop, or a test, waits for. */
let underWay: Promise<void> = Promise.resolve();

/**
 * Takes a wish for a new password. The answer is the same whether anybody has the address, and comes before
 * it is looked up, so that neither words nor time tell who is known here. Limited by network address.
 */
export async function ask(input: ResetInput & { address: string }): Promise<Outcome<null>> {
	const counted = await countReset(input.address);
	if (!counted.ok) return counted;
	underWay = Promise.all([underWay, mailLink(input.email)]).then(
		() => undefined,
		(error: unknown) => log().error({ err: error }, 'a link for a new password could not be mailed')
	);
	return ok(null);
}

/** Resolves when every wish taken so far is answered by a mail, or by none. */
export function settled(): Promise<void> {
	return underWay;
}

/** Whose link a secret is; changes nothing. */
export async function readLink(secret: string): Promise<Outcome<{ name: string; email: string }>> {
	const owner = await store.findResetOwner(hashSecret(secret), new Date().toISOString());
	return owner ? ok({ name: owner.name, email: owner.email }) : UNKNOWN_LINK;
}

async function replace(owner: PersonRecord, tokenHash: string, password: string): Promise<Outcome<Person>> {
	const passwordHash = await hashPassword(password);
	const at = new Date().toISOString();
	return write(async (t): Promise<Outcome<Person>> => {
		if (!(await store.useReset(tokenHash, at, t))) return UNKNOWN_LINK;
		await updatePerson(owner.id, { passwordHash }, t);
		await deleteLinksOf(owner.id, t);
		await deleteSessionsOf(owner.id, t);
		await audit.record(toActor(owner), 'person.password', `person:${owner.id}`, { by: 'mail' }, t);
		await queueMail(owner.email, passwordChangedLetter({ name: owner.name, at }), t);
		return ok({ id: owner.id, name: owner.name });
	});
}

/**
 * Sets a new password by a mailed link, once. Every sign-in of before ends, and every other link of the person
 * with it; they are told by mail. Answers whose it is.
 */
export async function reset(secret: string, password: string): Promise<Outcome<Person>> {
	const tokenHash = hashSecret(secret);
	const owner = await store.findResetOwner(tokenHash, new Date().toISOString());
	if (!owner) return UNKNOWN_LINK;
	const fault = findNewPasswordFault(password, owner);
	if (fault) return fail('invalid', fault, { errors: [{ field: 'password', message: fault }] });
	return replace(owner, tokenHash, password);
}

/** Removes links that ran out long ago; called now and then by the server. */
export function deleteExpired(): Promise<void> {
	return write((t) => store.deleteResetsBefore(new Date(Date.now() - DAY_MS).toISOString(), t));
}
