import { createServer, request as openRequest, type IncomingMessage, type Server } from 'node:http';
import type { AddressInfo } from 'node:net';
import { getRequest, setResponse } from '@sveltejs/kit/node';
import { afterEach, beforeEach, describe, expect, it } from 'vitest';
import { overrideConfig } from '$lib/server/config';
import { receiveUploads } from '$lib/server/evidence/receive-uploads';
import { respond } from '$lib/server/http/respond';
import { withDatabase } from '../../../fixtures/database';
import { listDataFiles } from '../../../fixtures/spool';

withDatabase();

let server: Server;
/** What the server had received of the body when it answered. */
let receivedBytes = 0;

async function answer(incoming: IncomingMessage, outgoing: Parameters<typeof setResponse>[0]): Promise<void> {
	incoming.on('data', (chunk: Buffer) => {
		receivedBytes += chunk.byteLength;
	});
	const request = await getRequest({ request: incoming, base: 'http://localhost' });
	await setResponse(outgoing, respond(await receiveUploads({ request }, { field: 'evidence' })));
}

beforeEach(async () => {
	overrideConfig({ maxUploadMb: 1 });
	receivedBytes = 0;
	server = createServer((incoming, outgoing) => void answer(incoming, outgoing));
	await new Promise<void>((resolve) => server.listen(0, '127.0.0.1', resolve));
});
afterEach(async () => {
	server.closeAllConnections();
	await new Promise((resolve) => server.close(resolve));
	overrideConfig({ maxUploadMb: 4096 });
});

const HEAD = '--b\r\nContent-Disposition: form-data; name="evidence"; filename="server.log"\r\n\r\n';
const MEGABYTE = Buffer.alloc(1024 * 1024, 'x');

function open(length: number | null) {
	const request = openRequest({
		port: (server.address() as AddressInfo).port,
		method: 'POST',
		headers: {
			'content-type': 'multipart/form-data; boundary=b',
			...(length === null ? {} : { 'content-length': length })
		}
	});
	const status = new Promise<number>((resolve, reject) => {
		request.on('response', (response) => {
			response.resume();
			resolve(response.statusCode ?? 0);
		});
		request.on('error', reject);
	});
	return { request, status };
}

describe('receiveUploads over a connection', () => {
	it('answers 413 to the announced length alone, before the body is sent', async () => {
		const { request, status } = open(200 * 1024 * 1024);
		request.write(HEAD);
		expect(await status).toBe(413);
		expect(receivedBytes).toBeLessThanOrEqual(HEAD.length);
		request.destroy();
	});

	it('lets a client read its refusal that first sends everything', async () => {
		const { request, status } = open(HEAD.length + 20 * MEGABYTE.byteLength);
		request.write(HEAD);
		for (let i = 0; i < 20; i++) request.write(MEGABYTE);
		await new Promise<void>((resolve) => request.end(resolve));
		expect(await status).toBe(413);
		expect(await listDataFiles('spool')).toEqual([]);
	});

	it('answers 413 while a body without a length is still coming', async () => {
		const { request, status } = open(null);
		request.write(HEAD);
		request.write(MEGABYTE);
		request.write(MEGABYTE);
		expect(await status).toBe(413);
		expect(await listDataFiles('spool')).toEqual([]);
		request.destroy();
	});

	it('leaves nothing of a client that hangs up', async () => {
		const { request, status } = open(600_000);
		request.write(HEAD);
		request.write(Buffer.alloc(300_000, 'x'));
		await expect.poll(() => listDataFiles('spool').then((files) => files.length)).toBe(1);
		request.destroy();
		await expect(status).rejects.toThrow();
		await expect.poll(() => listDataFiles('spool')).toEqual([]);
	});
});
