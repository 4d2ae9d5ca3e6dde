import type { Page } from '$lib/domain/page';
import type { PageQuery } from '$lib/domain/incident/incident-filter';
import { can } from '$lib/domain/person/can';
import type { Actor } from '$lib/domain/person/person';
import { fail, ok, type Outcome } from '$lib/domain/problem';
import { cutPage, readCursor } from '../api/cursor';
import { config } from '../config';
import { write, type Transaction } from '../db/transaction';
import { isOneAddress, toHeaderText } from './compose-mail';
import { wakePostman } from './deliver-mail';
import type { Letter } from './letters';
import * as store from './mail-store';
import { removeFromOutbox } from './outbox-files';

const DAY_MS = 24 * 60 * 60 * 1000;
/** How long the outbox remembers: longer than any link in it opens. */
const KEEP_DAYS = 30;
const LIST = 'outbox';

/** A mail as administrators see it. */
export type OutboxMail = Omit<store.MailRecord, 'nextTryAt'>;

/**
 * Puts a letter into the outbox, in the transaction of what it tells about: none is sent of something that did
 * not happen, and none is lost. It leaves after the commit.
 */
export async function queueMail(recipient: string, letter: Letter, transaction: Transaction): Promise<void> {
	if (!isOneAddress(recipient)) throw new Error('A mail goes to one address.');
	await store.insertMail(
		{
			recipient,
			subject: toHeaderText(letter.subject),
			text: letter.text,
			createdAt: new Date().toISOString()
		},
		transaction
	);
	transaction.afterCommit(wakePostman);
}

/** Whether mail stays here, to be read at /outbox, because no mail server is set. */
export function staysHere(): boolean {
	return config().smtpUrl === null;
}

function notAllowed() {
	return fail('forbidden', 'Only an administrator reads the outbox.');
}

/** Only a mail that stays here is shown with its text: what a mail server carries is its reader's alone. */
function toOutboxMail({ nextTryAt: _nextTryAt, ...mail }: store.MailRecord): OutboxMail {
	return mail.state === 'kept' ? mail : { ...mail, text: null };
}

/** A page of the outbox, newest first. */
export async function list(actor: Actor, query: PageQuery): Promise<Outcome<Page<OutboxMail>>> {
	if (!can(actor, 'mail.read')) return notAllowed();
	const after = readCursor(LIST, query.cursor);
	if (!after.ok) return after;
	const [found, total] = await Promise.all([
		store.listMails(after.value?.id ?? null, query.limit + 1),
		store.countMails()
	]);
	const { rows, next } = cutPage(found, query.limit, LIST, ({ id }) => ({ key: id, id }));
	return ok({ items: rows.map(toOutboxMail), next, total });
}

/** One mail of the outbox. */
export async function read(actor: Actor, id: number): Promise<Outcome<OutboxMail>> {
	if (!can(actor, 'mail.read')) return notAllowed();
	const mail = await store.findMail(id);
	return mail === null ? fail('not_found', `There is no mail ${id}.`) : ok(toOutboxMail(mail));
}

/** Forgets the mails of long ago, files included; called now and then by the server. */
export async function forgetOldMail(): Promise<void> {
	const ids = await store.listSettledBefore(new Date(Date.now() - KEEP_DAYS * DAY_MS).toISOString());
	for (const id of ids) await removeFromOutbox(id);
	await write(() => store.deleteMails(ids));
}
