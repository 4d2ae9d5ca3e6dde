import fc from 'fast-check';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { CALLS } from '$lib/server/api/calls/calls';
import type { Call } from '$lib/server/api/call';
import type { Database } from '$lib/server/db/connection';
import { dropDatabase, makeDatabase } from '../../../fixtures/database';
import { makeIncident } from '../../../fixtures/factories/incident';
import { makePerson } from '../../../fixtures/factories/person';
import { request, signInAs } from '../../../fixtures/request';
import { listDataFiles } from '../../../fixtures/spool';

/** Requests a call; the seed makes a failure repeatable. */
const RUNS = 12;
const SEED = 20260302;

let db: Database;
let cookie = '';
beforeAll(async () => {
	db = await makeDatabase();
	await makeIncident();
	cookie = await signInAs((await makePerson({ role: 'curator' })).id);
});
afterAll(() => dropDatabase(db));

/** What breaks parsers, queries and file systems. */
const nasty = fc.oneof(
	fc.string({ maxLength: 40 }),
	fc.string({ unit: 'binary', maxLength: 20 }),
	fc.constantFrom(
		'',
		'0',
		'-1',
		'1',
		'1e309',
		'NaN',
		'null',
		'\0',
		"' OR 1=1 --",
		'"',
		'../../etc/passwd',
		'%',
		'${x}',
		':name',
		'$1',
		'<script>alert(1)</script>',
		'\ud800',
		'9'.repeat(400),
		'__proto__',
		'2026-02-30',
		'2026-03-02T02:00:00Z'
	)
);

function nameOf(call: Call): string {
	return `${call.method.toUpperCase()} ${call.path}`;
}

/** Names that the call's schemas know, so that values reach what reads them. */
function fieldsOf(call: Call): string[] {
	const schema = call.body?.json ?? call.body?.mergePatch;
	return schema !== undefined && 'shape' in schema ? Object.keys(schema.shape as object) : ['title'];
}

const value: fc.Arbitrary<unknown> = fc.oneof(
	nasty,
	fc.jsonValue({ maxDepth: 3 }),
	fc.constantFrom(1, 0, -1, 1e308, true, null, [], {}, '2026-03-02T02:00:00+14:00', ['a'], [{ number: 1 }])
);

function bodyOf(call: Call): fc.Arbitrary<{ body?: string; type: string }> {
	if (!call.body) return fc.constant({ type: '' });
	const json = fc.dictionary(fc.constantFrom(...fieldsOf(call)), value).map((fields) => ({
		body: JSON.stringify(fields).replaceAll('\\u0000', '\0'),
		type: 'application/json'
	}));
	const text = fc
		.tuple(nasty, fc.constantFrom('application/json', 'text/plain', 'multipart/form-data; boundary=x', 'x/y'))
		.map(([body, type]) => ({ body, type }));
	const part = nasty.map((content) => ({
		body: `--x\r\nContent-Disposition: form-data; name="evidence"; filename="${content.replaceAll(/["\r\n]/g, '')}"\r\n\r\n${content}\r\n--x--\r\n`,
		type: 'multipart/form-data; boundary=x'
	}));
	return fc.oneof(json, text, part);
}

function pathOf(call: Call): fc.Arbitrary<string> {
	const names = [...call.path.matchAll(/\{(\w+)\}/g)];
	const parameters = fc.tuple(...names.map(() => fc.oneof(fc.constant('1'), nasty)));
	const known = Object.keys(call.query?.shape ?? { q: 0 });
	const query = fc.array(fc.tuple(fc.constantFrom(...known), nasty), { maxLength: 3 });
	return fc.tuple(parameters, query).map(([values, pairs]) => {
		let next = 0;
		const path = call.path.replaceAll(/\{\w+\}/g, () =>
			encodeURIComponent((values[next++] ?? '1').toWellFormed() || '1')
		);
		return `/api/v1${path}?${new URLSearchParams(pairs)}`;
	});
}

/** Dots alone are a way up, not a name: the address parser takes them out before any route sees them. */
const isPath = (path: string) => new URL(path, 'http://localhost').pathname.startsWith('/api/v1/');

describe.each(CALLS.map((call): [string, Call] => [nameOf(call), call]))('%s', (_name, call) => {
	it('answers whatever it is sent with its own answer or a problem, never with a fault', async () => {
		const sent = fc.record({
			path: pathOf(call).filter(isPath),
			body: bodyOf(call),
			tag: fc.constantFrom('"1"', '"2"', '*', 'W/"1"', '')
		});
		await fc.assert(
			fc.asyncProperty(sent, async ({ path, body: { body, type }, tag }) => {
				const headers: Record<string, string> = {};
				if (type !== '') headers['content-type'] = type;
				if (tag !== '') headers['if-match'] = tag;
				const response = await request(call.method.toUpperCase(), path, { as: { cookie }, body, headers });
				expect(response.status).toBeLessThan(500);
				const problem = response.headers.get('content-type') === 'application/problem+json';
				expect(problem).toBe(response.status >= 400);
				await response.arrayBuffer();
			}),
			{ numRuns: RUNS, seed: SEED }
		);
		expect(await listDataFiles('spool')).toEqual([]);
	});
});
