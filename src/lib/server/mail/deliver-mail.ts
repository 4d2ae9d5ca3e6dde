import { setTimeout as sleep } from 'node:timers/promises';
import { createTransport } from 'nodemailer';
import type Mail from 'nodemailer/lib/mailer';
import { config } from '../config';
import { write } from '../db/transaction';
import { log } from '../log';
import { composeMail } from './compose-mail';
import * as store from './mail-store';
import { keepInOutbox } from './outbox-files';

const MINUTE_MS = 60_000;
/** How long to wait after the first, second … failure; after the last the mail is given up. */
const WAIT_MINUTES = [1, 5, 30, 120, 480];
/** From this reply code on a mail server refuses for good (RFC 5321 section 4.2.1). */
const PERMANENT = 500;
const STOP_MS = 5_000;

/** What went wrong, without anything of the mail: its links are secrets. */
function describeFailure(error: unknown): { words: string; isPermanent: boolean } {
	const field = (name: string): unknown =>
		error instanceof Error && name in error ? (error as Error & Record<string, unknown>)[name] : undefined;
	const code = field('code');
	const reply = field('responseCode');
	const parts = [code, reply].filter((part) => typeof part === 'string' || typeof part === 'number');
	return {
		words: parts.length > 0 ? parts.join(' ') : 'it could not be sent',
		isPermanent: typeof reply === 'number' && reply >= PERMANENT
	};
}

async function send(smtpUrl: string, mail: Mail.Options): Promise<void> {
	const transport = createTransport(smtpUrl);
	try {
		await transport.sendMail(mail);
	} finally {
		transport.close();
	}
}

async function noteFailure(mail: store.WaitingMail, error: unknown): Promise<void> {
	const { words, isPermanent } = describeFailure(error);
	const waitMinutes = WAIT_MINUTES[mail.tries];
	const isOver = isPermanent || waitMinutes === undefined;
	log().warn({ mail: mail.id, failure: words, tries: mail.tries + 1, isOver }, 'mail not sent');
	await write((t) =>
		store.updateMail(
			mail.id,
			{
				tries: mail.tries + 1,
				failure: words,
				nextTryAt: new Date(Date.now() + (waitMinutes ?? 0) * MINUTE_MS).toISOString(),
				...(isOver ? { state: 'failed', text: null } : {})
			},
			t
		)
	);
}

async function deliverOne(mail: store.WaitingMail): Promise<void> {
	const { smtpUrl } = config();
	try {
		const composed = composeMail(mail);
		if (smtpUrl === null) await keepInOutbox(mail.id, composed);
		else await send(smtpUrl, composed);
	} catch (error) {
		// Whatever a mail server or a full disk says: the mail waits for its next turn.
		await noteFailure(mail, error);
		return;
	}
	const sentAt = new Date().toISOString();
	await write((t) =>
		store.updateMail(
			mail.id,
			{
				sentAt,
				failure: null,
				tries: mail.tries + 1,
				...(smtpUrl === null ? { state: 'kept' } : { state: 'sent', text: null })
			},
			t
		)
	);
}

/** Sends every mail whose turn it is, one after another, oldest first. Not to be run twice at once. */
export async function deliverDue(): Promise<void> {
	for (;;) {
		const mail = await store.findDue(new Date().toISOString());
		if (mail === null) return;
		await deliverOne(mail);
	}
}

let wake: () => void = () => undefined;

/** Tells the postman that there is mail; nothing happens where none is at work. */
export function wakePostman(): void {
	wake();
}

/**
 * Starts the postman: sends what waits, at once when woken and else every minute. Answers what stops it, after
 * the mail in its hand or a few seconds.
 */
export function startPostman(): () => Promise<void> {
	const stopping = new AbortController();
	const work = async () => {
		while (!stopping.signal.aborted) {
			const woken = new Promise<void>((resolve) => (wake = resolve));
			try {
				await deliverDue();
			} catch (error) {
				log().error({ err: error }, 'the outbox could not be worked off');
			}
			const pause = sleep(MINUTE_MS, undefined, { ref: false, signal: stopping.signal }).catch(
				() => undefined
			);
			await Promise.race([woken, pause]);
		}
	};
	const working = work();
	return async () => {
		stopping.abort();
		wake();
		wake = () => undefined;
		await Promise.race([working, sleep(STOP_MS, undefined, { ref: false })]);
	};
}
