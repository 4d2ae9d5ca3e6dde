import { createHash } from 'node:crypto';
import { readdir, readFile, stat } from 'node:fs/promises';
import path from 'node:path';
import { beforeEach, describe, expect, it } from 'vitest';
import { config, overrideConfig } from '$lib/server/config';
import { receiveUploads, type Received } from '$lib/server/evidence/receive-uploads';
import { withDatabase } from '../../../fixtures/database';

const ADDRESS = 'http://localhost/api/v1/evidence';
const OPTIONS = { field: 'evidence', documents: ['incident'] };

withDatabase();
beforeEach(() => {
	overrideConfig({ maxUploadMb: 1 });
});

async function listSpool(): Promise<string[]> {
	return readdir(path.join(config().dataDir, 'spool')).catch(() => []);
}

function post(body: BodyInit, headers: Record<string, string> = {}): Request {
	const init: RequestInit & { duplex: 'half' } = { method: 'POST', body, headers, duplex: 'half' };
	return new Request(ADDRESS, init);
}

function form(...parts: [string, string | Blob, string?][]): FormData {
	const data = new FormData();
	for (const [name, value, file] of parts) {
		if (typeof value === 'string') data.append(name, value);
		else data.append(name, value, file);
	}
	return data;
}

async function receive(request: Request): Promise<Received> {
	const received = await receiveUploads({ request }, OPTIONS);
	if (!received.ok) throw new Error(received.problem.detail);
	return received.value;
}

async function refuse(request: Request): Promise<string> {
	const received = await receiveUploads({ request }, OPTIONS);
	return received.ok ? 'received' : received.problem.code;
}

const MULTIPART = { 'content-type': 'multipart/form-data; boundary=cut' };

/** A multipart body in pieces, with or without its end. */
function inPieces(
	pieces: readonly (string | Uint8Array)[],
	end: 'whole' | 'broken'
): ReadableStream<Uint8Array> {
	const encoder = new TextEncoder();
	let next = 0;
	return new ReadableStream({
		pull(controller) {
			const piece = pieces[next++];
			if (piece !== undefined) controller.enqueue(typeof piece === 'string' ? encoder.encode(piece) : piece);
			else if (end === 'whole') controller.close();
			else controller.error(new Error('socket hang up'));
		}
	});
}

const HEAD = '--cut\r\nContent-Disposition: form-data; name="evidence"; filename="server.log"\r\n\r\n';

describe('receiveUploads', () => {
	it('refuses by the announced length before it reads anything', async () => {
		let pulled = 0;
		const body = new ReadableStream<Uint8Array>(
			{
				pull(controller) {
					pulled += 1;
					controller.close();
				}
			},
			{ highWaterMark: 0 }
		);
		const request = post(body, { ...MULTIPART, 'content-length': String(1024 * 1024 + 1) });
		const code = refuse(request);
		expect(pulled).toBe(0);
		expect(await code).toBe('too_large');
		expect(await listSpool()).toEqual([]);
	});

	it('refuses a body that announced no length as soon as it is too long, and leaves nothing', async () => {
		const chunk = new Uint8Array(300 * 1024);
		const request = post(inPieces([HEAD, chunk, chunk, chunk, chunk, '\r\n--cut--'], 'whole'), MULTIPART);
		expect(await refuse(request)).toBe('too_large');
		expect(await listSpool()).toEqual([]);
	});

	it('refuses what is not multipart', async () => {
		expect(await refuse(post('{}', { 'content-type': 'application/json' }))).toBe('unsupported');
		expect(await refuse(post('x', { 'content-type': 'multipart/form-database; boundary=x' }))).toBe(
			'unsupported'
		);
	});

	it('refuses a multipart body without a boundary or without its end, and leaves nothing', async () => {
		expect(await refuse(post('x', { 'content-type': 'multipart/form-data' }))).toBe('invalid');
		expect(await refuse(post(inPieces([HEAD, 'half a log'], 'whole'), MULTIPART))).toBe('invalid');
		expect(await listSpool()).toEqual([]);
	});

	it('cleans up when the client hangs up', async () => {
		expect(await refuse(post(inPieces([HEAD, 'half a log'], 'broken'), MULTIPART))).toBe('invalid');
		expect(await listSpool()).toEqual([]);
	});

	it('refuses a file under another name, and takes back the one that came before', async () => {
		const data = form(['evidence', new Blob(['LOG: x']), 'a.log'], ['picture', new Blob(['x']), 'b.png']);
		const received = await receiveUploads({ request: post(data) }, OPTIONS);
		expect(received).toMatchObject({
			ok: false,
			problem: { code: 'invalid', errors: [{ field: 'picture' }] }
		});
		expect(await listSpool()).toEqual([]);
	});

	it('spools several files as they came, readable by nobody else', async () => {
		const text = 'LOG:  temporary file: path "base/pgsql_tmp/pgsql_tmp7.0", size 1024';
		const { uploads } = await receive(
			post(form(['evidence', new Blob([text]), 'server.log'], ['evidence', new Blob(['']), 'empty.json']))
		);
		expect(uploads).toMatchObject([
			{ name: 'server.log', bytes: text.length, rawSha256: createHash('sha256').update(text).digest('hex') },
			{ name: 'empty.json', bytes: 0 }
		]);
		const [first] = uploads;
		expect(await readFile(first?.path ?? '', 'utf8')).toBe(text);
		expect((await stat(first?.path ?? '')).mode & 0o777).toBe(0o600);
	});

	it('keeps a name without its folders and control characters', async () => {
		const data = form(
			['evidence', new Blob(['x']), '../../etc/Plan Übersicht.txt'],
			['evidence', new Blob(['x']), 'plan\u202egnp.exe'],
			['evidence', new Blob(['x']), `${'long'.repeat(100)}.json`]
		);
		const names = (await receive(post(data))).uploads.map((upload) => upload.name);
		expect(names.slice(0, 2)).toEqual(['Plan Übersicht.txt', 'plangnp.exe']);
		expect(names[2]).toHaveLength(200);
		expect(names[2]).toMatch(/^long.+….+long\.json$/);
	});

	it('takes a text pasted under the name of the files for a file', async () => {
		const { uploads, fields } = await receive(
			post(form(['evidence', 'Seq Scan on port_call'], ['incident', '7']))
		);
		expect(uploads).toMatchObject([{ name: 'paste.txt', bytes: 21, mimeType: 'text/plain' }]);
		expect(fields).toEqual({ incident: '7' });
	});

	it('takes a document that was sent as a file for a field', async () => {
		const json = new Blob(['{"title":"Slow"}'], { type: 'application/json' });
		const { uploads, fields } = await receive(post(form(['incident', json, 'blob'])));
		expect(uploads).toEqual([]);
		expect(fields).toEqual({ incident: '{"title":"Slow"}' });
		expect(await listSpool()).toEqual([]);
	});
});
