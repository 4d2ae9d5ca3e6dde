import { describe, expect, it } from 'vitest';
import { select } from '$lib/server/db/query';
import { withDatabase } from '../../../fixtures/database';
import { makeIncident } from '../../../fixtures/factories/incident';
import { request } from '../../../fixtures/request';

withDatabase();

async function ownerOf(number: number): Promise<number | null> {
	const [row] = await select<{ ownerId: number | null }>(
		'SELECT ownerId FROM incidents WHERE number = :number',
		{ number }
	);
	return row?.ownerId ?? null;
}

const take = (number: number, revision: number) =>
	new URLSearchParams({ number: String(number), revision: String(revision) });

describe('taking an incident on the Watch', () => {
	it('is refused to a reader', async () => {
		const number = await makeIncident();
		const answer = await request('POST', '/?/take', { as: 'reader', body: take(number, 1) });
		expect(answer.status).toBe(403);
		expect(await ownerOf(number)).toBeNull();
	});

	it('says so when somebody changed the incident meanwhile', async () => {
		const number = await makeIncident({ revision: 2 });
		const answer = await request('POST', '/?/take', { as: 'responder', body: take(number, 1) });
		expect(answer.status).toBe(412);
		expect(await ownerOf(number)).toBeNull();
	});

	it('puts the person on it and goes to the incident', async () => {
		const number = await makeIncident();
		const answer = await request('POST', '/?/take', { as: 'responder', body: take(number, 1) });
		expect(answer.status).toBe(303);
		expect(answer.headers.get('location')).toBe(`/incidents/${number}`);
		expect(await ownerOf(number)).not.toBeNull();
	});
});
