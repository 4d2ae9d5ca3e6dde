import { readdir, readFile, stat } from 'node:fs/promises';
import { createServer, type Server } from 'node:net';
import path from 'node:path';
import { afterEach, describe, expect, it } from 'vitest';
import { config, overrideConfig } from '$lib/server/config';
import { MailModel } from '$lib/server/db/models/mail';
import { write } from '$lib/server/db/transaction';
import { deliverDue, startPostman } from '$lib/server/mail/deliver-mail';
import { composeMail } from '$lib/server/mail/compose-mail';
import { outboxPath } from '$lib/server/mail/outbox-files';
import * as mail from '$lib/server/mail/mail-service';
import { makeActor } from '../../../fixtures/factories/person';
import { withDatabase } from '../../../fixtures/database';

const LETTER = { subject: 'Your invitation', text: 'Hello,\n\nhttp://localhost/invitation/abc\n' };
const TO = 'ines@northmoor.example';

withDatabase();

let server: Server | null = null;
afterEach(() => {
	overrideConfig({ smtpUrl: null });
	server?.close();
	server = null;
});

function queue(recipient = TO, letter = LETTER): Promise<void> {
	return write((t) => mail.queueMail(recipient, letter, t));
}

async function readKept(): Promise<string> {
	await deliverDue();
	const row = await MailModel.findOne({ rejectOnEmpty: true });
	return readFile(outboxPath(row.id), 'utf8');
}

/** The head of a mail, its folded lines joined. */
function headOf(message: string): string[] {
	const [head = ''] = message.split('\r\n\r\n');
	return head.replaceAll(/\r\n[ \t]+/g, ' ').split('\r\n');
}

/** A mail server that speaks as little SMTP as is needed; `answerTo` gives its reply to RCPT. */
async function serveSmtp(answerTo: string): Promise<string[]> {
	const lines: string[] = [];
	server = createServer((socket) => {
		let isData = false;
		socket.on('error', () => socket.destroy());
		socket.write('220 here\r\n');
		socket.on('data', (bytes) => {
			for (const line of bytes.toString().split('\r\n').slice(0, -1)) {
				lines.push(line);
				if (isData) {
					if (line !== '.') continue;
					isData = false;
					socket.write('250 taken\r\n');
				} else if (line === 'DATA') {
					isData = true;
					socket.write('354 go on\r\n');
				} else if (line.startsWith('RCPT')) socket.write(`${answerTo}\r\n`);
				else socket.write('250 well\r\n');
			}
		});
	});
	const listening = server;
	await new Promise<void>((resolve) => listening.listen(0, '127.0.0.1', resolve));
	const address = listening.address();
	const port = typeof address === 'object' && address !== null ? address.port : 0;
	overrideConfig({ smtpUrl: `smtp://127.0.0.1:${port}?ignoreTLS=true` });
	return lines;
}

describe('queueMail', () => {
	it.each([
		'ines@northmoor.example\r\nBcc: all@northmoor.example',
		'ines@northmoor.example, other@northmoor.example',
		'ines@northmoor.example\0',
		'group: ines@northmoor.example;',
		'Ines <ines@northmoor.example>',
		'nobody'
	])('refuses to write to %j', async (recipient) => {
		await expect(queue(recipient)).rejects.toThrow(/address/);
		expect(await MailModel.count()).toBe(0);
	});

	it('sends nothing of a transaction that failed', async () => {
		const failing = write(async (t) => {
			await mail.queueMail(TO, LETTER, t);
			throw new Error('and now this');
		});
		await expect(failing).rejects.toThrow('and now this');
		expect(await MailModel.count()).toBe(0);
	});
});

// RFC 5322 section 2.2: a header ends at CRLF; RFC 3834 section 5: Auto-Submitted.
describe('a mail', () => {
	it('keeps a line break of a subject out of its head', async () => {
		await queue(TO, { ...LETTER, subject: 'Hello\r\nBcc: all@northmoor.example\u2028X: y' });
		const head = headOf(await readKept());
		expect(head.filter((line) => /^(bcc|x):/i.test(line))).toEqual([]);
		expect(head.find((line) => line.startsWith('Subject:'))).toContain('Hello Bcc:');
	});

	it('is refused as a whole where its recipient is none', () => {
		const row = { id: 1, recipient: 'a@x\nb@y', ...LETTER, createdAt: '2026-12-01T00:00:00.000Z' };
		expect(() => composeMail(row)).toThrow(/no address/);
	});

	it('says that a program wrote it, so that no responder answers', async () => {
		await queue();
		const head = headOf(await readKept());
		expect(head).toContain('Auto-Submitted: auto-generated');
		expect(head).toContain('X-Auto-Response-Suppress: All');
		expect(head).toContain(`To: ${TO}`);
		expect(head.filter((line) => line.startsWith('Message-ID: <'))).toHaveLength(1);
		expect(head.filter((line) => /^Date: .* \+0000$/.test(line))).toHaveLength(1);
	});
});

describe('the local outbox', () => {
	it('keeps each mail in a file that only the server reads', async () => {
		await queue();
		await readKept();
		const folder = path.join(config().dataDir, 'outbox');
		const [name = ''] = await readdir(folder);
		expect(name).toMatch(/^\d{6}\.eml$/);
		expect((await stat(path.join(folder, name))).mode & 0o777).toBe(0o600);
		expect((await stat(folder)).mode & 0o777).toBe(0o700);
	});

	it.each(['reader', 'responder', 'curator'] as const)('shows nothing to a %s', async (role) => {
		await queue();
		await deliverDue();
		const actor = await makeActor(role);
		expect(await mail.list(actor, { limit: 50 })).toMatchObject({ problem: { code: 'forbidden' } });
		expect(await mail.read(actor, 1)).toMatchObject({ problem: { code: 'forbidden' } });
	});

	it('shows an administrator what lies in it, newest first, page by page', async () => {
		for (const subject of ['one', 'two', 'three']) await queue(TO, { ...LETTER, subject });
		await deliverDue();
		const actor = await makeActor('administrator');
		const first = await mail.list(actor, { limit: 2 });
		if (!first.ok) throw new Error(first.problem.detail);
		expect(first.value.items.map(({ subject }) => subject)).toEqual(['three', 'two']);
		expect(first.value.items[0]).toMatchObject({ state: 'kept', text: LETTER.text });
		const second = await mail.list(actor, { limit: 2, cursor: first.value.next ?? '' });
		expect(second).toMatchObject({ ok: true, value: { items: [{ subject: 'one' }], next: null, total: 3 } });
	});

	it('forgets mails of long ago with their files', async () => {
		await queue();
		await deliverDue();
		await write(() => MailModel.update({ createdAt: '2026-01-01T00:00:00.000Z' }, { where: {} }));
		await mail.forgetOldMail();
		expect(await MailModel.count()).toBe(0);
		expect(await readdir(path.join(config().dataDir, 'outbox'))).toEqual([]);
	});
});

describe('a mail server', () => {
	it('gets the mail, of which only the fact is kept', async () => {
		const lines = await serveSmtp('250 well');
		await queue();
		await deliverDue();
		expect(lines).toContain(`RCPT TO:<${TO}>`);
		expect(lines).toContain('http://localhost/invitation/abc');
		expect(await MailModel.findOne()).toMatchObject({ state: 'sent', text: null, tries: 1 });
	});

	it('is asked again later where it is down, and the text is shown to nobody meanwhile', async () => {
		overrideConfig({ smtpUrl: 'smtp://127.0.0.1:1' });
		await queue();
		await deliverDue();
		const row = await MailModel.findOne({ rejectOnEmpty: true });
		expect(row).toMatchObject({ state: 'waiting', tries: 1, text: LETTER.text });
		expect(row.nextTryAt > new Date().toISOString()).toBe(true);
		expect(row.failure).not.toContain('invitation');
		const shown = await mail.read(await makeActor('administrator'), row.id);
		expect(shown).toMatchObject({ ok: true, value: { text: null, state: 'waiting' } });
	});

	it('is not asked again where it refuses for good', async () => {
		await serveSmtp('550 no such person');
		await queue();
		await deliverDue();
		expect(await MailModel.findOne()).toMatchObject({ state: 'failed', text: null });
	});
});

describe('the postman', () => {
	it('takes a mail as soon as its transaction is through', async () => {
		const stop = startPostman();
		try {
			await queue();
			await expect.poll(async () => (await MailModel.findOne())?.state).toBe('kept');
		} finally {
			await stop();
		}
	});
});
