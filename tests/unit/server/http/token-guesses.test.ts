import { describe, expect, it } from 'vitest';
import * as tokens from '$lib/server/sessions/tokens-service';
import { withDatabase } from '../../../fixtures/database';
import { makePerson } from '../../../fixtures/factories/person';
import { request } from '../../../fixtures/request';

withDatabase();

async function guessTooOften(address: string): Promise<void> {
	for (let count = 0; count < 65; count += 1) {
		await request('GET', '/api/v1/symptoms', { as: { token: `cw_guess${count}` }, address });
	}
}

describe('readToken, after too many guesses from an address', () => {
	it('refuses further guesses with the seconds to wait', async () => {
		const address = '198.51.100.201';
		await guessTooOften(address);
		const response = await request('GET', '/api/v1/symptoms', { as: { token: 'cw_another' }, address });
		expect(response.status).toBe(429);
		expect(Number(response.headers.get('retry-after'))).toBeGreaterThan(0);
	});

	it('lets a good token in: whoever shares the address with a stranger is not shut out', async () => {
		const address = '198.51.100.202';
		await guessTooOften(address);
		const { actor, id } = await makePerson({ role: 'reader' });
		const made = await tokens.create(actor, { personId: id, name: 'curl', role: 'reader', days: 1 });
		if (!made.ok) throw new Error(made.problem.detail);
		const as = { token: made.value.token };
		expect((await request('GET', '/api/v1/symptoms', { as, address })).status).toBe(200);
	});
});
