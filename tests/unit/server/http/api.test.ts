import { describe, expect, it } from 'vitest';
import { z } from 'zod';
import { readJson, readQuery, requireIfMatch } from '$lib/server/http/api';
import { readForm, readTyped } from '$lib/server/http/form';
import { failWith, problemResponse, respond, unwrap } from '$lib/server/http/respond';
import { fail, ok } from '$lib/domain/problem';

const schema = z.object({
	title: z.string({ error: 'Say what is wrong.' }).min(1),
	severity: z.number().int().min(1).max(4).nullable().optional(),
	labels: z.array(z.string().min(2, 'At least two letters.')).optional(),
	pages: z.array(z.number()).optional(),
	urgent: z.boolean().default(false)
});

function post(body: string | Uint8Array<ArrayBuffer>, type: string | null = 'application/json') {
	const headers = type === null ? undefined : { 'content-type': type };
	return { request: new Request('http://localhost/', { method: 'POST', body, headers }) };
}

describe('readJson', () => {
	it.each(['text/plain', 'application/x-www-form-urlencoded', 'application/jsonp'])(
		'refuses %s',
		async (type) => {
			expect(await readJson(post('{"title":"x"}', type), schema)).toMatchObject({
				ok: false,
				problem: { code: 'unsupported' }
			});
		}
	);

	it.each([
		['nothing', ''],
		['half of it', '{"title": "x'],
		['something else', 'title=x']
	])('refuses %s in the place of JSON', async (_title, body) => {
		expect(await readJson(post(body), schema)).toMatchObject({ ok: false, problem: { code: 'invalid' } });
	});

	it('refuses bytes that are no UTF-8', async () => {
		const bytes = new Uint8Array([0x7b, 0x22, 0xff, 0x22, 0x7d]);
		expect(await readJson(post(bytes), schema)).toMatchObject({
			ok: false,
			problem: { code: 'invalid', detail: 'The body is not UTF-8.' }
		});
	});

	it('refuses what is too long to be held in memory', async () => {
		const body = JSON.stringify({ title: 'x'.repeat(9 * 1024 * 1024) });
		expect(await readJson(post(body), schema)).toMatchObject({ ok: false, problem: { code: 'too_large' } });
	});

	it('names each field that does not fit, as the client writes it', async () => {
		const result = await readJson(post('{"severity": 7, "labels": ["io", "x"]}'), schema);
		expect(result.ok ? [] : result.problem.errors?.map((issue) => issue.field)).toEqual([
			'title',
			'severity',
			'labels[1]'
		]);
	});

	it('takes JSON under any of its names', async () => {
		for (const type of ['application/json; charset=utf-8', 'application/merge-patch+json']) {
			expect(await readJson(post('{"title":"x"}', type), schema)).toMatchObject({
				ok: true,
				value: { title: 'x', urgent: false }
			});
		}
	});
});

describe('readQuery', () => {
	const read = (query: string) => readQuery(new URL(`http://localhost/?${query}`), schema);

	it('refuses a number that is none', () => {
		expect(read('title=x&severity=1e1')).toMatchObject({
			ok: false,
			problem: { errors: [{ field: 'severity' }] }
		});
	});

	it('reads numbers, lists and switches, and leaves unknown names alone', () => {
		expect(read('title=x&severity=2&labels=io&labels=cpu&pages=3&pages=4&urgent=true&utm=1')).toEqual({
			ok: true,
			value: { title: 'x', severity: 2, labels: ['io', 'cpu'], pages: [3, 4], urgent: true }
		});
	});
});

describe('readForm', () => {
	it('takes an empty field for null where that is allowed, and for left out elsewhere', () => {
		const form = new FormData();
		form.set('title', 'x');
		form.set('severity', '');
		form.set('labels', '');
		form.set('urgent', 'on');
		expect(readForm(form, schema)).toEqual({ ok: true, value: { title: 'x', severity: null, urgent: true } });
	});

	it('gives back what was typed but for the fields that are named', () => {
		const form = new FormData();
		form.set('email', 'a@b.example');
		form.set('password', 'secret');
		form.set('file', new Blob(['x']), 'x.txt');
		expect(readTyped(form, ['password'])).toEqual({ email: 'a@b.example' });
	});
});

describe('requireIfMatch', () => {
	const read = (value: string | null) =>
		requireIfMatch({
			request: new Request('http://localhost/', { headers: value === null ? {} : { 'if-match': value } })
		});

	it.each([null, '', '*'])('asks for a revision in the place of %j', (value) => {
		expect(read(value)).toMatchObject({ ok: false, problem: { code: 'precondition_required' } });
	});

	// RFC 9110 section 13.1.1: If-Match compares strongly, so a weak tag never matches; quotes belong to the tag.
	it.each(['W/"3"', '3', '"abc"', '"3", "4"', '"-1"'])('matches nothing with %s', (value) => {
		expect(read(value)).toMatchObject({ ok: false, problem: { code: 'stale' } });
	});

	it('reads the revision', () => {
		expect(read(' "12" ')).toEqual({ ok: true, value: 12 });
	});
});

describe('respond', () => {
	it('answers a problem as RFC 9457 wants it, with what helps', async () => {
		const response = respond(fail('rate_limited', 'Too many tries.', { retryAfterSeconds: 41.2 }));
		expect(response.status).toBe(429);
		expect(response.headers.get('retry-after')).toBe('42');
		expect(response.headers.get('content-type')).toBe('application/problem+json');
		expect(await response.json()).toEqual({
			type: 'about:blank',
			title: 'Too Many Requests',
			status: 429,
			detail: 'Too many tries.',
			code: 'rate_limited'
		});
	});

	it('shows the thing as it stands to whoever came too late', async () => {
		const response = problemResponse(
			fail('stale', 'Somebody was quicker.', { current: { revision: 4 } }).problem
		);
		expect(response.status).toBe(412);
		expect(await response.json()).toMatchObject({ current: { revision: 4 } });
	});

	it('sends a revision as a strong tag and nothing with 204', async () => {
		expect(respond(ok({ a: 1 }), { status: 201, etag: 3 }).headers.get('etag')).toBe('"3"');
		expect(await respond(ok(null), { status: 204 }).text()).toBe('');
	});
});

describe('unwrap and failWith', () => {
	it('turn a problem into the page error and the form failure of its status', () => {
		const problem = fail('refused', 'Not yet.', { reasons: ['A caution is missing.'] });
		expect(() => unwrap(problem)).toThrow(
			expect.objectContaining({
				status: 409,
				body: expect.objectContaining({ reasons: ['A caution is missing.'] })
			})
		);
		const invalid = fail('invalid', 'Correct title.', {
			errors: [
				{ field: 'title', message: 'first' },
				{ field: 'title', message: 'second' }
			]
		});
		expect(failWith(invalid.problem, { title: '' })).toMatchObject({
			status: 400,
			data: { issues: { title: 'first' }, values: { title: '' } }
		});
	});
});
