import type { RequestEvent } from '@sveltejs/kit';
import { beforeEach, describe, expect, it } from 'vitest';
import type { Actor } from '$lib/domain/person/person';
import { IdempotencyKeyModel } from '$lib/server/db/models/idempotency-key';
import { write } from '$lib/server/db/transaction';
import { BodyHash } from '$lib/server/http/body-hash';
import { idempotent } from '$lib/server/http/idempotency';
import { releaseRunningKeys } from '$lib/server/http/idempotency-store';
import { makeActor } from '../../../fixtures/factories/person';
import { withDatabase } from '../../../fixtures/database';

withDatabase();

let actor: Actor;
let runs = 0;
beforeEach(async () => {
	actor = await makeActor('responder');
	runs = 0;
});

interface Sending {
	key?: string | null;
	path?: string;
	body?: BodyInit;
	by?: Actor;
	status?: number;
	/** The call waits for it. */
	until?: Promise<void>;
	fault?: Error;
}

/** Sends a POST whose call counts its runs and answers what it was sent. */
function send({
	key = 'k1',
	path = '/api/v1/incidents',
	body = '{"a":1}',
	status = 201,
	...rest
}: Sending = {}) {
	const url = new URL(path, 'http://localhost');
	const headers = new Headers(key === null ? {} : { 'idempotency-key': key });
	const event = {
		url,
		request: new Request(url, { method: 'POST', headers, body }),
		locals: { actor: rest.by ?? actor, requestId: 'r' }
	} as RequestEvent;
	return idempotent(event, async (running) => {
		runs += 1;
		const received = await running.request.text();
		await rest.until;
		if (rest.fault) throw rest.fault;
		return new Response(JSON.stringify({ run: runs, bytes: received.length }), {
			status,
			headers: { location: `/api/v1/incidents/${runs}`, etag: '"1"', 'content-type': 'application/json' }
		});
	});
}

function multipart(boundary: string, text: string): Blob {
	const body = `--${boundary}\r\nContent-Disposition: form-data; name="a"\r\n\r\n${text}\r\n--${boundary}--\r\n`;
	return new Blob([body], { type: `multipart/form-data; boundary=${boundary}` });
}

describe('idempotent', () => {
	it('refuses the same key with another body', async () => {
		await send();
		const response = await send({ body: '{"a":2}' });
		expect(response.status).toBe(422);
		expect(await response.json()).toMatchObject({ code: 'conflict' });
		expect(runs).toBe(1);
	});

	it('refuses the same key while the first request is under way', async () => {
		let finish = () => undefined as void;
		const first = send({ until: new Promise((resolve) => (finish = resolve)) });
		await expect.poll(() => runs).toBe(1);
		expect((await send()).status).toBe(409);
		finish();
		expect((await first).status).toBe(201);
	});

	it('refuses a key that is empty or very long', async () => {
		expect((await send({ key: '' })).status).toBe(400);
		expect((await send({ key: 'k'.repeat(201) })).status).toBe(400);
		expect(runs).toBe(0);
	});

	it('answers the same again without running again', async () => {
		const first = await send();
		const second = await send();
		expect(runs).toBe(1);
		expect(second.status).toBe(201);
		expect(second.headers.get('location')).toBe('/api/v1/incidents/1');
		expect(second.headers.get('etag')).toBe('"1"');
		expect(await second.json()).toEqual(await first.json());
	});

	it('runs once when the same request comes ten times at once', async () => {
		const responses = await Promise.all(Array.from({ length: 10 }, () => send()));
		expect(runs).toBe(1);
		expect(responses.every(({ status }) => status === 201 || status === 409)).toBe(true);
	});

	it('takes the same files with another boundary for the same body', async () => {
		await send({ body: multipart('aaaa1111', 'a plan') });
		expect((await send({ body: multipart('bbbb2222', 'a plan') })).status).toBe(201);
		expect((await send({ body: multipart('cccc3333', 'another plan') })).status).toBe(422);
		expect(runs).toBe(1);
	});

	it('keeps keys apart by person and address', async () => {
		await send();
		await send({ path: '/api/v1/incidents/1/entries' });
		await send({ by: await makeActor('responder') });
		expect(runs).toBe(3);
	});

	it('frees the key after a refusal and after a fault, since nothing was done', async () => {
		expect((await send({ status: 400 })).status).toBe(400);
		await expect(send({ fault: new Error('on purpose') })).rejects.toThrow('on purpose');
		expect((await send()).status).toBe(201);
		expect(runs).toBe(3);
	});

	it('forgets a key after 24 hours, and one that a crash cut off at the next start', async () => {
		await send();
		const old = new Date(Date.now() - 25 * 60 * 60 * 1000).toISOString();
		await write(() => IdempotencyKeyModel.update({ createdAt: old }, { where: {} }));
		await send({ body: '{"a":2}' });
		expect(runs).toBe(2);
		await write(() => IdempotencyKeyModel.update({ state: 'running' }, { where: {} }));
		await releaseRunningKeys();
		await send({ body: '{"a":3}' });
		expect(runs).toBe(3);
	});

	it('runs each time without a key', async () => {
		await send({ key: null });
		await send({ key: null });
		expect(runs).toBe(2);
	});
});

describe('BodyHash', () => {
	it('is the same however the body is cut into chunks', () => {
		const type = 'multipart/form-data; boundary="--abc"';
		const bytes = Buffer.from('----abc\r\n\r\none--ab\r\n----abc\r\n\r\ntwo\r\n----abc--\r\n');
		const whole = new BodyHash(type);
		whole.update(bytes);
		const expected = whole.finish();
		for (let size = 1; size <= 12; size += 1) {
			const cut = new BodyHash(type);
			for (let at = 0; at < bytes.length; at += size) cut.update(bytes.subarray(at, at + size));
			expect(cut.finish()).toBe(expected);
		}
	});
});
