import { mkdir, rm, writeFile } from 'node:fs/promises';
import path from 'node:path';
import { createTransport } from 'nodemailer';
import type Mail from 'nodemailer/lib/mailer';
import { config } from '../config';

/** Readable by the server's own account alone: the links in it open doors. */
const PRIVATE_FILE = 0o600;
const PRIVATE_FOLDER = 0o700;

/** Where a mail of the local outbox lies. */
export function outboxPath(id: number): string {
	return path.join(config().dataDir, 'outbox', `${String(id).padStart(6, '0')}.eml`);
}

/** Puts a mail into the local outbox, as a mail server would have got it (RFC 5322). */
export async function keepInOutbox(id: number, mail: Mail.Options): Promise<void> {
	const composer = createTransport({ streamTransport: true, buffer: true, newline: 'windows' });
	const { message } = await composer.sendMail(mail);
	if (!Buffer.isBuffer(message)) throw new Error('The composed mail is no buffer.');
	const file = outboxPath(id);
	await mkdir(path.dirname(file), { recursive: true, mode: PRIVATE_FOLDER });
	await writeFile(file, message, { mode: PRIVATE_FILE });
}

/** Removes a mail from the local outbox; nothing to do where it isn't there. */
export async function removeFromOutbox(id: number): Promise<void> {
	await rm(outboxPath(id), { force: true });
}
