import type Mail from 'nodemailer/lib/mailer';
import { config } from '../config';

/** What a header may not hold: line breaks would begin a header of the writer's own. */
const CONTROL = /[\p{Cc}\p{Zl}\p{Zp}]+/gu;

/** A text as it may stand in a header: on one line. */
export function toHeaderText(text: string): string {
	return text.replace(CONTROL, ' ').trim();
}

/** Whether an address is one address and nothing else: what people-input.ts lets in, asked once more. */
export function isOneAddress(text: string): boolean {
	return /^[^\s\p{C}@()<>[\]:;,"\\]+@[^\s\p{C}@()<>[\]:;,"\\]+$/u.test(text);
}

/**
 * A mail as nodemailer takes it: plain text, marked as automatic (RFC 3834 section 5: no responder may answer
 * it), Date and Message-ID made from the mail's own moment. The address goes in as a single one, never as text to be
 * taken apart.
 */
export function composeMail(mail: {
	id: number;
	recipient: string;
	subject: string;
	text: string;
	createdAt: string;
}): Mail.Options {
	if (!isOneAddress(mail.recipient)) throw new Error(`Mail ${mail.id} has a recipient that is no address.`);
	return {
		from: config().mailFrom,
		to: { name: '', address: mail.recipient },
		subject: toHeaderText(mail.subject),
		text: mail.text,
		date: new Date(mail.createdAt),
		headers: { 'Auto-Submitted': 'auto-generated', 'X-Auto-Response-Suppress': 'All' },
		// Nothing in a mail may make the server read a file or fetch an address.
		disableFileAccess: true,
		disableUrlAccess: true
	};
}
