import type { Page } from '$lib/domain/page';
import { can } from '$lib/domain/person/can';
import type { PeopleQuery } from '$lib/domain/person/people-query';
import type { Actor, Person } from '$lib/domain/person/person';
import type { PasswordChangeInput, PersonInput, SignInInput } from '$lib/domain/person/person-input';
import { fail, ok, type Outcome } from '$lib/domain/problem';
import { cutPage, readCursor, type Place } from '../api/cursor';
import * as audit from '../audit/audit-service';
import { config, isLoopback } from '../config';
import { write } from '../db/transaction';
import { passwordChangedLetter } from '../mail/letters';
import { queueMail } from '../mail/mail-service';
import { hashSecret, makeSecret } from '../secrets';
import { deleteSessionsOf } from '../sessions/session-store';
import { DEMO_PASSWORD } from './demo-password';
import { hashPassword, verifyPassword } from './password';
import { findNewPasswordFault } from './password-fault';
import { needsAdministrator, toActor, toDetail, type PersonDetail } from './person-detail';
import * as store from './people-store';
import { countSignIn, forgetSignIn } from './sign-in-limits';

export { update } from './change-person';
export type { PersonDetail };

const DAY_MS = 24 * 60 * 60 * 1000;
/** How long the link of a newcomer opens. */
export const LINK_DAYS = 7;
const LIST = 'people';

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
	await write((t) => audit.record(toActor(person), 'person.sign-in', `person:${person.id}`, {}, t));
	return ok({ id: person.id, name: person.name });
}

/** The demonstration's printed password opens only on the machine itself. */
function isShutDemo(password: string): boolean {
	return password === DEMO_PASSWORD && !isLoopback(config().host);
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
	if (!can(actor, 'people.manage')) return needsAdministrator();
	return write(async (t) => {
		if (await store.findByEmail(input.email)) {
			return fail('refused', 'There is a person with this address already.', {
				reasons: [`${input.email} belongs to somebody.`]
			});
		}
		const createdAt = new Date().toISOString();
		const id = await store.insertPerson({ ...input, passwordHash: null, createdAt }, t);
		const linkToken = await putLink(actor, { id, name: input.name }, 'person.add');
		const fresh = { passwordHash: null, deactivatedAt: null, lastSignInAt: null, revision: 1 };
		return ok({ person: toDetail({ ...input, ...fresh, id, createdAt }), linkToken });
	});
}

/** A fresh link for somebody who is known already; links given before no longer open. */
export async function renewLink(
	actor: Actor,
	email: string
): Promise<Outcome<{ person: PersonDetail; linkToken: string }>> {
	if (!can(actor, 'people.manage')) return needsAdministrator();
	const person = await store.findByEmail(email.trim().toLowerCase());
	if (!person || person.deactivatedAt !== null)
		return fail('not_found', `Nobody here has the address ${email}.`);
	return ok({ person: toDetail(person), linkToken: await putLink(actor, person, 'person.link') });
}

/** The person of an address, for whoever manages people. */
export async function find(actor: Actor, email: string): Promise<Outcome<PersonDetail>> {
	if (!can(actor, 'people.manage')) return needsAdministrator();
	const person = await store.findByEmail(email.trim().toLowerCase());
	return person ? ok(toDetail(person)) : fail('not_found', `Nobody here has the address ${email}.`);
}

/** Whose link a secret is; changes nothing. Not found where it was used, has run out or never was. */
export async function readLink(linkToken: string): Promise<Outcome<{ name: string; email: string }>> {
	const owner = await store.findLinkOwner(hashSecret(linkToken), new Date().toISOString());
	return owner ? ok({ name: owner.name, email: owner.email }) : UNKNOWN_LINK;
}

/** Sets a password, in one transaction with the end of every session that the person had. */
async function replacePassword(
	actor: Actor,
	{ id, name, email }: store.PersonRecord,
	password: string
): Promise<void> {
	const passwordHash = await hashPassword(password);
	await write(async (t) => {
		await store.updatePerson(id, { passwordHash }, t);
		await store.deleteLinksOf(id, t);
		await deleteSessionsOf(id, t);
		await audit.record(actor, 'person.password', `person:${id}`, {}, t);
		await queueMail(email, passwordChangedLetter({ name, at: new Date().toISOString() }), t);
	});
}

/** Sets the password by a link, once, and ends every session of the person. Answers whose it is. */
export async function setPasswordByLink(linkToken: string, password: string): Promise<Outcome<Person>> {
	const tokenHash = hashSecret(linkToken);
	const now = new Date().toISOString();
	const owner = await store.findLinkOwner(tokenHash, now);
	if (!owner) return UNKNOWN_LINK;
	const fault = findNewPasswordFault(password, owner);
	if (fault) return fail('invalid', fault, { errors: [{ field: 'password', message: fault }] });
	const passwordHash = await hashPassword(password);
	return write(async (t) => {
		if (!(await store.useLink(tokenHash, now, t))) return UNKNOWN_LINK;
		await store.updatePerson(owner.id, { passwordHash }, t);
		await deleteSessionsOf(owner.id, t);
		await store.deleteLinksOf(owner.id, t);
		await audit.record(toActor(owner), 'person.password', `person:${owner.id}`, { by: 'link' }, t);
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
	const fault = findNewPasswordFault(input.password, person);
	if (fault) return fail('invalid', fault, { errors: [{ field: 'password', message: fault }] });
	await replacePassword(actor, person, input.password);
	return ok(null);
}

/** One's own name, address and role. */
export async function readSelf(actor: Actor): Promise<Outcome<PersonDetail>> {
	const person = actor.personId === null ? null : await store.findById(actor.personId);
	if (!can(actor, 'account.own') || !person) return fail('not_found', 'The system itself has no account.');
	return ok(toDetail(person));
}

/** A page of people by name, those who left last. */
export async function listPage(actor: Actor, query: PeopleQuery): Promise<Outcome<Page<PersonDetail>>> {
	if (!can(actor, 'people.manage')) return needsAdministrator();
	const after = readCursor(LIST, query.cursor);
	if (!after.ok) return after;
	const filter = { active: query.active ?? null, role: query.role ?? null };
	const [found, total] = await Promise.all([
		store.listPeople(filter, toPlace(after.value), query.limit + 1),
		store.countPeople(filter)
	]);
	const { rows, next } = cutPage(found, query.limit, LIST, ({ id, name, deactivatedAt }) => ({
		key: `${deactivatedAt === null ? 'here' : 'left'} ${name}`,
		id
	}));
	return ok({ items: rows.map(toDetail), next, total });
}

/** A cursor's key is the word `here` or `left`, a blank, and the name. */
function toPlace(place: Place | null): store.PersonPlace | null {
	if (place === null) return null;
	const key = String(place.key);
	return { hasLeft: key.startsWith('left '), name: key.slice('left '.length), id: place.id };
}

/** One person as administrators see them. */
export async function read(actor: Actor, id: number): Promise<Outcome<PersonDetail>> {
	if (!can(actor, 'people.manage')) return needsAdministrator();
	const person = await store.findById(id);
	return person ? ok(toDetail(person)) : fail('not_found', `There is no person ${id}.`);
}

/** Everybody, those who left last. */
export async function list(actor: Actor): Promise<Outcome<PersonDetail[]>> {
	if (!can(actor, 'people.manage')) return needsAdministrator();
	return ok((await store.listAll()).map(toDetail));
}

/** Who may be on an incident: everybody who may sign in and whose role lets them write. Names and ids only. */
export async function listResponders(actor: Actor): Promise<Outcome<Person[]>> {
	if (!can(actor, 'incident.write')) return needsAdministrator();
	const people = await store.listAll();
	return ok(
		people
			.filter((person) => person.deactivatedAt === null)
			.filter((person) => can(toActor(person), 'incident.write'))
			.map(({ id, name }) => ({ id, name }))
	);
}
