import type { PageQuery } from '$lib/domain/incident/incident-filter';
import type { Page } from '$lib/domain/page';
import { can } from '$lib/domain/person/can';
import type { Actor, Person } from '$lib/domain/person/person';
import type { AcceptInput, InvitationInput } from '$lib/domain/person/person-input';
import { fail, ok, type Outcome } from '$lib/domain/problem';
import { cutPage, readCursor } from '../api/cursor';
import * as audit from '../audit/audit-service';
import { write, type Transaction } from '../db/transaction';
import { inviteLetter } from '../mail/letters';
import { queueMail } from '../mail/mail-service';
import { hashSecret, makeSecret } from '../secrets';
import * as store from './invitation-store';
import { hashPassword } from './password';
import { findNewPasswordFault } from './password-fault';
import { findByEmail, insertPerson } from './people-store';
import { needsAdministrator, toActor } from './person-detail';

const DAY_MS = 24 * 60 * 60 * 1000;
/** How long the link of an invitation opens. */
export const INVITATION_DAYS = 7;
const LIST = 'invitations';

/** An invitation as administrators see it; its link is in the mail alone. */
export interface Invitation extends store.InvitationRecord {
	state: 'open' | 'expired' | 'used' | 'revoked';
}

function stateOf(record: store.InvitationRecord, now: string): Invitation['state'] {
	if (record.usedAt !== null) return 'used';
	if (record.revokedAt !== null) return 'revoked';
	return record.expiresAt > now ? 'open' : 'expired';
}

function toInvitation(record: store.InvitationRecord): Invitation {
	return { ...record, state: stateOf(record, new Date().toISOString()) };
}

function noInvitation(id: number) {
	return fail('not_found', `There is no invitation ${id}.`);
}

function refused(reason: string) {
	return fail('refused', reason, { reasons: [reason] });
}

const UNKNOWN_LINK = fail(
	'not_found',
	'This invitation was used already, has run out or was taken back. Ask whoever invited you for a new one.'
);

/** A page of all invitations, newest first. */
export async function list(actor: Actor, query: PageQuery): Promise<Outcome<Page<Invitation>>> {
	if (!can(actor, 'people.manage')) return needsAdministrator();
	const after = readCursor(LIST, query.cursor);
	if (!after.ok) return after;
	const [found, total] = await Promise.all([
		store.listInvitations(after.value?.id ?? null, query.limit + 1),
		store.countInvitations()
	]);
	const { rows, next } = cutPage(found, query.limit, LIST, ({ id }) => ({ key: id, id }));
	return ok({ items: rows.map(toInvitation), next, total });
}

/** The invitations that nobody has answered, newest first; those that have run out included. */
export async function listUnanswered(actor: Actor): Promise<Outcome<Invitation[]>> {
	if (!can(actor, 'people.manage')) return needsAdministrator();
	return ok((await store.listUnanswered()).map(toInvitation));
}

/** One invitation. */
export async function read(actor: Actor, id: number): Promise<Outcome<Invitation>> {
	if (!can(actor, 'people.manage')) return needsAdministrator();
	const found = await store.findInvitation(id);
	return found ? ok(toInvitation(found)) : noInvitation(id);
}

/** A fresh secret, how it is kept, and until when it opens. */
function makeLink(): { secret: string; tokenHash: string; expiresAt: string } {
	const secret = makeSecret();
	const expiresAt = new Date(Date.now() + INVITATION_DAYS * DAY_MS).toISOString();
	return { secret, tokenHash: hashSecret(secret), expiresAt };
}

async function refuseKnown(email: string): Promise<Outcome<null>> {
	const person = await findByEmail(email);
	if (!person) return ok(null);
	return refused(
		person.deactivatedAt === null
			? `${email} belongs to ${person.name}, who is here already.`
			: `${email} belongs to ${person.name}, whose account is closed: open it again instead.`
	);
}

/** Invites somebody by mail; the address must be nobody's, and have no open invitation. */
export async function invite(actor: Actor, input: InvitationInput): Promise<Outcome<Invitation>> {
	if (!can(actor, 'people.manage')) return needsAdministrator();
	const { secret, tokenHash, expiresAt } = makeLink();
	const added = await write(async (t): Promise<Outcome<number>> => {
		const free = await refuseKnown(input.email);
		if (!free.ok) return free;
		const createdAt = new Date().toISOString();
		const fields = { ...input, tokenHash, invitedById: actor.personId, createdAt, expiresAt };
		const id = await store.insertInvitation(fields, t);
		if (id === null) return refused(`${input.email} is invited already: send that invitation again.`);
		await queueMail(input.email, inviteLetter({ by: actor.name, role: input.role, expiresAt, secret }), t);
		await audit.record(actor, 'invitation.create', `invitation:${id}`, { ...input }, t);
		return ok(id);
	});
	return added.ok ? read(actor, added.value) : added;
}

/** Runs a change of an invitation that must still be unanswered. */
async function changeUnanswered(
	actor: Actor,
	id: number,
	change: (found: store.InvitationRecord, t: Transaction) => Promise<unknown>
): Promise<Outcome<Invitation>> {
	if (!can(actor, 'people.manage')) return needsAdministrator();
	const changed = await write(async (t): Promise<Outcome<null>> => {
		const found = await store.findInvitation(id);
		if (!found) return noInvitation(id);
		if (found.usedAt !== null) return refused(`${found.email} has used this invitation.`);
		if (found.revokedAt !== null) return refused('This invitation was taken back: invite anew.');
		await change(found, t);
		return ok(null);
	});
	return changed.ok ? read(actor, id) : changed;
}

/** Mails a new link, good for its full time again; the one before opens no more. */
export function resend(actor: Actor, id: number): Promise<Outcome<Invitation>> {
	return changeUnanswered(actor, id, async ({ email, role }, t) => {
		const { secret, tokenHash, expiresAt } = makeLink();
		await store.changeOpen(id, { tokenHash, expiresAt }, t);
		await queueMail(email, inviteLetter({ by: actor.name, role, expiresAt, secret }), t);
		await audit.record(actor, 'invitation.resend', `invitation:${id}`, { email }, t);
	});
}

/** Takes an invitation back: its link opens no more. */
export function revoke(actor: Actor, id: number): Promise<Outcome<Invitation>> {
	return changeUnanswered(actor, id, async ({ email }, t) => {
		await store.changeOpen(id, { revokedAt: new Date().toISOString() }, t);
		await audit.record(actor, 'invitation.revoke', `invitation:${id}`, { email }, t);
	});
}

/** Whom a link invites, and as what; changes nothing. */
export async function readLink(secret: string): Promise<Outcome<Pick<Invitation, 'email' | 'role'>>> {
	const found = await store.findByToken(hashSecret(secret), new Date().toISOString());
	return found ? ok({ email: found.email, role: found.role }) : UNKNOWN_LINK;
}

/** Uses a link, once: the person is there afterwards, with the address and role that they were invited with. */
export async function accept(secret: string, input: AcceptInput): Promise<Outcome<Person>> {
	const found = await store.findByToken(hashSecret(secret), new Date().toISOString());
	if (!found) return UNKNOWN_LINK;
	const { email, role } = found;
	const { name } = input;
	const fault = findNewPasswordFault(input.password, { name, email });
	if (fault) return fail('invalid', fault, { errors: [{ field: 'password', message: fault }] });
	const passwordHash = await hashPassword(input.password);
	return write(async (t): Promise<Outcome<Person>> => {
		// Asked again: hashing took its time, and somebody else may have been quicker.
		const now = new Date().toISOString();
		if (!(await store.findByToken(hashSecret(secret), now))) return UNKNOWN_LINK;
		const free = await refuseKnown(email);
		if (!free.ok) return free;
		await store.changeOpen(found.id, { usedAt: now }, t);
		const id = await insertPerson({ name, email, role, passwordHash, createdAt: now }, t);
		await audit.record(
			toActor({ id, name, role }),
			'person.join',
			`person:${id}`,
			{ invitation: found.id },
			t
		);
		return ok({ id, name });
	});
}
