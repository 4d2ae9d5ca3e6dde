import { createServer, type IncomingHttpHeaders, type Server } from 'node:http';
import { mkdtemp, rm, writeFile } from 'node:fs/promises';
import type { AddressInfo } from 'node:net';
import { tmpdir } from 'node:os';
import path from 'node:path';
import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest';
import { overrideConfig } from '$lib/server/config';
import { closeDatabase, openDatabase } from '$lib/server/db/connection';
import * as people from '$lib/server/people/people-service';
import * as tokens from '$lib/server/sessions/tokens-service';
import { UsageError, type Verb } from '../../../src/cli/verb';
import { addPerson } from '../../../src/cli/verbs/add-person';
import { check } from '../../../src/cli/verbs/check';
import { migrate } from '../../../src/cli/verbs/migrate';
import { sendEvidence } from '../../../src/cli/verbs/send-evidence';
import { token } from '../../../src/cli/verbs/token';

let dataDir = '';

beforeEach(async () => {
	dataDir = await mkdtemp(path.join(tmpdir(), 'catchwater-'));
	overrideConfig({ dataDir, origin: 'https://catchwater.example.org' });
});
afterEach(async () => {
	await rm(dataDir, { recursive: true, force: true });
});

/** Runs a verb as the command line would; answers its exit code and what it printed. */
async function run(verb: Verb, ...args: string[]) {
	const out: string[] = [];
	const err: string[] = [];
	const log = vi.spyOn(console, 'log').mockImplementation((line) => out.push(String(line)));
	const error = vi.spyOn(console, 'error').mockImplementation((line) => err.push(String(line)));
	try {
		return { code: await verb.run(args), out: out.join('\n'), err: err.join('\n') };
	} finally {
		log.mockRestore();
		error.mockRestore();
	}
}

const ADA = ['--email', 'Ada@northmoor.example', '--name', 'Ada Moss', '--role', 'responder'];

describe('add-person', () => {
	it.each([
		['no role', ADA.slice(0, 4)],
		['a role that is none', [...ADA.slice(0, 5), 'owner']],
		['an address that is none', ['--email', 'ada', ...ADA.slice(2)]],
		['an option that is none', [...ADA, '--password', 'x']]
	])('refuses %s as wrong usage', async (_title, args) => {
		await expect(run(addPerson, ...args)).rejects.toThrow(UsageError);
	});

	it('refuses somebody who is here, and gives them a new link with --again', async () => {
		await run(addPerson, ...ADA);
		expect(await run(addPerson, ...ADA)).toMatchObject({ code: 1, out: '' });
		const again = await run(addPerson, '--email', 'ada@northmoor.example', '--again');
		expect(again).toMatchObject({ code: 0, out: expect.stringContaining('/welcome/') });
	});

	it('prints the link by which the person sets their password', async () => {
		const { code, out } = await run(addPerson, ...ADA);
		expect(code).toBe(0);
		const link = /^https:\/\/catchwater\.example\.org\/welcome\/([\w-]{43})$/m.exec(out)?.[1] ?? '';
		await openDatabase(dataDir);
		expect(await people.readLink(link)).toMatchObject({ ok: true, value: { name: 'Ada Moss' } });
		await closeDatabase();
	});
});

describe('token', () => {
	it('refuses a role above the person’s, nobody, and more than a year', async () => {
		await run(addPerson, ...ADA);
		const args = ['--email', 'ada@northmoor.example', '--name', 'log shipper', '--role'];
		expect(await run(token, ...args, 'curator')).toMatchObject({ code: 1, out: '' });
		expect(await run(token, '--email', 'x@y.example', ...args.slice(2), 'reader')).toMatchObject({ code: 1 });
		await expect(run(token, ...args, 'reader', '--days', '400')).rejects.toThrow(UsageError);
	});

	it('prints a token that opens', async () => {
		await run(addPerson, ...ADA);
		const { out } = await run(
			token,
			'--email',
			ADA[1] ?? '',
			'--name',
			'ci',
			'--role',
			'reader',
			'--days',
			'2'
		);
		await openDatabase(dataDir);
		expect(await tokens.validate(out)).toMatchObject({ role: 'reader', name: 'Ada Moss' });
		await closeDatabase();
	});
});

describe('migrate and check', () => {
	it('tell what is to be done, do it, and find nothing more', async () => {
		expect(await run(check)).toMatchObject({ code: 1, out: expect.stringContaining('catchwater migrate') });
		expect(await run(migrate)).toMatchObject({ code: 0, out: expect.stringContaining('0001-first-tables') });
		expect(await run(migrate)).toMatchObject({ code: 0, out: 'up to date' });
		expect(await run(check)).toMatchObject({ code: 0 });
	});
});

describe('send-evidence', () => {
	let server: Server;
	let received: { headers: IncomingHttpHeaders; body: string; path: string }[] = [];
	let answer: { status: number; type: string; body: object };

	beforeEach(async () => {
		received = [];
		server = createServer((request, response) => {
			const chunks: Buffer[] = [];
			request.on('data', (chunk: Buffer) => chunks.push(chunk));
			request.on('end', () => {
				const body = Buffer.concat(chunks).toString();
				received.push({ headers: request.headers, body, path: request.url ?? '' });
				response.writeHead(answer.status, { 'content-type': answer.type });
				response.end(JSON.stringify(answer.body));
			});
		});
		await new Promise<void>((resolve) => server.listen(0, '127.0.0.1', resolve));
		answer = {
			status: 201,
			type: 'application/json',
			body: {
				items: [
					{
						name: 'plan.txt',
						format: 'postgres-text',
						state: 'read',
						readings: [{ symptoms: [{ summary: 'The hash join ran in 8 batches.' }] }]
					}
				]
			}
		};
	});
	afterEach(() => new Promise((resolve) => server.close(resolve)));

	const target = () => [
		'--url',
		`http://127.0.0.1:${(server.address() as AddressInfo).port}`,
		'--token',
		'cw_test'
	];

	async function makeFile(text: string): Promise<string> {
		const file = path.join(dataDir, 'plan.txt');
		await writeFile(file, text);
		return file;
	}

	it('refuses to start without a file, an address or a token', async () => {
		const file = await makeFile('x');
		await expect(run(sendEvidence, ...target())).rejects.toThrow(UsageError);
		await expect(run(sendEvidence, '--url', 'localhost', '--token', 'cw_x', file)).rejects.toThrow(
			UsageError
		);
		await expect(run(sendEvidence, '--url', 'http://localhost', file)).rejects.toThrow(UsageError);
		expect(received).toEqual([]);
	});

	it('says why the server refused, sends the rest all the same, and ends with 1', async () => {
		answer = {
			status: 403,
			type: 'application/problem+json',
			body: { detail: 'The role reader does not allow this.' }
		};
		const file = await makeFile('x');
		const { code, err } = await run(sendEvidence, ...target(), '/no/such/file', file);
		expect(code).toBe(1);
		expect(err).toContain('/no/such/file: ');
		expect(err).toContain(`${file}: The role reader does not allow this.`);
		expect(received).toHaveLength(1);
	});

	it('sends the file with its name, the incident and the token, and prints what was read', async () => {
		const file = await makeFile('Seq Scan on berths');
		const { code, out } = await run(sendEvidence, ...target(), '--incident', '412', file);
		expect({ code, out }).toEqual({
			code: 0,
			out: 'plan.txt: postgres-text\n  The hash join ran in 8 batches.'
		});
		expect(received[0]?.path).toBe('/api/v1/evidence');
		expect(received[0]?.headers.authorization).toBe('Bearer cw_test');
		expect(received[0]?.body).toContain('filename="plan.txt"');
		expect(received[0]?.body).toContain('Seq Scan on berths');
		expect(received[0]?.body).toMatch(/name="incident"\r\n\r\n412\r\n/);
	});
});
