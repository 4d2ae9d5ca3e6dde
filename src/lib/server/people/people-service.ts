import { can } from '$lib/domain/person/can';
import { findPasswordFault } from '$lib/domain/person/password-rule';
import type { Actor, Person, Role } from '$lib/domain/person/person';
import type { PasswordChangeInput, PersonInput, SignInInput } from '$lib/domain/person/person-input';
import { fail, ok, type Outcome } from '$lib/domain/problem';
import * as audit from '../audit/audit-service';
import { config, isLoopback } from '../config';
import { write } from '../db/transaction';
import { hashSecret, makeSecret } from '../secrets';
import { deleteSessionsOf } from '../sessions/session-store';
import { revokeTokensOf } from '../sessions/token-store';
import { DEMO_PASSWORD } from './demo-password';
import { hashPassword, verifyPassword } from './password';
import * as store from './people-store';
import { countSignIn, forgetSignIn } from './sign-in-limits';

const DAY_MS = 24 * 60 * 60 * 1000;
/** How long the link of a newcomer opens. */
export const LINK_DAYS = 7;

/** A person as administrators see them. */
export interface PersonDetail extends Person {
	email: string;
	role: Role;
	createdAt: string;
	deactivatedAt: string | null;
	hasPassword: boolean;
}

function toDetail(record: store.PersonRecord): PersonDetail {
	const { id, name, email, role, createdAt, deactivatedAt } = record;
	return { id, name, email, role, createdAt, deactivatedAt, hasPassword: record.passwordHash !== null };
}

const NOT_ALLOWED = fail('forbidden', 'Only an administrator manages people.');
const UNKNOWN_LINK = fail(
	'not_found',
	'This link was used already, has run out or was replaced. Ask an administrator for a new one.'
);

/**
 * Checks an address and a password; answers whose they are. Unknown address, wrong password, no password
 * set and a person who left all get one answer, after the same time. Tries are limited by person and
 * network address together, so that a stranger cannot lock anybody out.
 */
export async function signIn(input: SignInInput & { address: string }): Promise<Outcome<Person>> {
	const counted = await countSignIn(input.email, input.address);
	if (!counted.ok) return counted;
	const person = await store.findByEmail(input.email);
	const isOpen = person?.deactivatedAt === null && !isShutDemo(input.password);
	const usableHash = isOpen ? person.passwordHash : null;
	const fits = await verifyPassword(usableHash, input.password);
	if (!person || !fits) {
		return fail('unauthenticated', 'This address and this password do not belong together.');
	}
	await forgetSignIn(input.email, input.address);
	return ok({ id: person.id, name: person.name });
}

/** The demonstration's printed password opens only on the machine itself. */
function isShutDemo(password: string): boolean {
	return password === DEMO_PASSWORD && !isLoopback(config().host);
}

/** What is wrong with a new password; null where it will do. */
function findFault(password: string, person: { name: string; email: string }): string | null {
	if (password === DEMO_PASSWORD) return 'This is the password of the demonstration, known to all.';
	return findPasswordFault(password, person);
}

async function putLink(actor: Actor, person: Person, action: string): Promise<string> {
	const secret = makeSecret();
	await write(async (t) => {
		const expiresAt = new Date(Date.now() + LINK_DAYS * DAY_MS).toISOString();
		await store.replaceLink({ tokenHash: hashSecret(secret), personId: person.id, expiresAt }, t);
		await audit.record(actor, action, `person:${person.id}`, {}, t);
	});
	return secret;
}

/**
 * Adds a person and answers the secret of the link by which they set their password. The address must be
 * new.
 */
export async function add(
	actor: Actor,
	input: PersonInput
): Promise<Outcome<{ person: PersonDetail; linkToken: string }>> {
	if (!can(actor, 'people.manage')) return NOT_ALLOWED;
	return write(async (t) => {
		if (await store.findByEmail(input.email)) {
			return fail('refused', 'There is a person with this address already.', {
				reasons: [`${input.email} belongs to somebody.`]
			});
		}
		const createdAt = new Date().toISOString();
		const id = await store.insertPerson({ ...input, passwordHash: null, createdAt }, t);
		const linkToken = await putLink(actor, { id, name: input.name }, 'person.add');
		const { name, email, role } = input;
		return ok({
			person: { id, name, email, role, createdAt, deactivatedAt: null, hasPassword: false },
			linkToken
		});
	});
}

/** A fresh link for somebody who is known already; links given before no longer open. */
export async function renewLink(
	actor: Actor,
	email: string
): Promise<Outcome<{ person: PersonDetail; linkToken: string }>> {
	if (!can(actor, 'people.manage')) return NOT_ALLOWED;
	const person = await store.findByEmail(email.trim().toLowerCase());
	if (!person || person.deactivatedAt !== null)
		return fail('not_found', `Nobody here has the address ${email}.`);
	return ok({ person: toDetail(person), linkToken: await putLink(actor, person, 'person.link') });
}

/** The person of an address, for whoever manages people. */
export async function find(actor: Actor, email: string): Promise<Outcome<PersonDetail>> {
	if (!can(actor, 'people.manage')) return NOT_ALLOWED;
	const person = await store.findByEmail(email.trim().toLowerCase());
	return person ? ok(toDetail(person)) : fail('not_found', `Nobody here has the address ${email}.`);
}

/** Whose link a secret is; changes nothing. Not found where it was used, has run out or never was. */
export async function readLink(linkToken: string): Promise<Outcome<{ name: string; email: string }>> {
	const owner = await store.findLinkOwner(hashSecret(linkToken), new Date().toISOString());
	return owner ? ok({ name: owner.name, email: owner.email }) : UNKNOWN_LINK;
}

/** Sets a password, in one transaction with the end of every session that the person had. */
async function replacePassword(actor: Actor, id: number, password: string): Promise<void> {
	const passwordHash = await hashPassword(password);
	await write(async (t) => {
		await store.updatePerson(id, { passwordHash }, t);
		await deleteSessionsOf(id, t);
		await audit.record(actor, 'person.password', `person:${id}`, {}, t);
	});
}

/** Sets the password by a link, once, and ends every session of the person. Answers whose it is. */
export async function setPasswordByLink(linkToken: string, password: string): Promise<Outcome<Person>> {
	const tokenHash = hashSecret(linkToken);
	const now = new Date().toISOString();
	const owner = await store.findLinkOwner(tokenHash, now);
	if (!owner) return UNKNOWN_LINK;
	const fault = findFault(password, owner);
	if (fault) return fail('invalid', fault, { errors: [{ field: 'password', message: fault }] });
	const actor: Actor = {
		personId: owner.id,
		name: owner.name,
		role: owner.role,
		via: 'session',
		tokenId: null
	};
	const passwordHash = await hashPassword(password);
	return write(async (t) => {
		if (!(await store.useLink(tokenHash, now, t))) return UNKNOWN_LINK;
		await store.updatePerson(owner.id, { passwordHash }, t);
		await deleteSessionsOf(owner.id, t);
		await audit.record(actor, 'person.password', `person:${owner.id}`, { by: 'link' }, t);
		return ok({ id: owner.id, name: owner.name });
	});
}

/**
 * Changes one's own password; the present one must be given (tries are limited like signing in). Ends every
 * session of the person, the one in use included: the caller makes a new one.
 */
export async function changePassword(
	actor: Actor,
	input: PasswordChangeInput & { address: string }
): Promise<Outcome<null>> {
	const person = actor.personId === null ? null : await store.findById(actor.personId);
	if (!can(actor, 'account.own') || !person) return fail('forbidden', 'Only a person has a password.');
	const counted = await countSignIn(person.email, input.address);
	if (!counted.ok) return counted;
	if (!(await verifyPassword(person.passwordHash, input.current))) {
		const message = 'This is not your present password.';
		return fail('invalid', message, { errors: [{ field: 'current', message }] });
	}
	await forgetSignIn(person.email, input.address);
	const fault = findFault(input.password, person);
	if (fault) return fail('invalid', fault, { errors: [{ field: 'password', message: fault }] });
	await replacePassword(actor, person.id, input.password);
	return ok(null);
}

/** One's own name, address and role. */
export async function readSelf(actor: Actor): Promise<Outcome<PersonDetail>> {
	const person = actor.personId === null ? null : await store.findById(actor.personId);
	if (!can(actor, 'account.own') || !person) return fail('not_found', 'The system itself has no account.');
	return ok(toDetail(person));
}

/** Everybody, those who left last. */
export async function list(actor: Actor): Promise<Outcome<PersonDetail[]>> {
	if (!can(actor, 'people.manage')) return NOT_ALLOWED;
	return ok((await store.listAll()).map(toDetail));
}

/** Who may be on an incident: everybody who may sign in and whose role lets them write. Names and ids only. */
export async function listResponders(actor: Actor): Promise<Outcome<Person[]>> {
	if (!can(actor, 'incident.write')) return NOT_ALLOWED;
	const people = await store.listAll();
	return ok(
		people
			.filter((person) => person.deactivatedAt === null)
			.filter(({ id, name, role }) =>
				can({ personId: id, name, role, via: 'session', tokenId: null }, 'incident.write')
			)
			.map(({ id, name }) => ({ id, name }))
	);
}

/** Closes a person's account: sessions and tokens end in the same transaction. What they wrote stays. */
export async function deactivate(actor: Actor, id: number): Promise<Outcome<null>> {
	if (!can(actor, 'people.manage')) return NOT_ALLOWED;
	return write(async (t) => {
		const person = await store.findById(id);
		if (!person) return fail('not_found', `There is no person ${id}.`);
		const now = new Date().toISOString();
		await store.updatePerson(id, { deactivatedAt: now }, t);
		await deleteSessionsOf(id, t);
		await revokeTokensOf(id, now, t);
		await audit.record(actor, 'person.deactivate', `person:${id}`, {}, t);
		return ok(null);
	});
}
