import { describe, expect, it } from 'vitest';
import { PersonModel } from '$lib/server/db/models/person';
import { deliverDue } from '$lib/server/mail/deliver-mail';
import { withDatabase } from '../../fixtures/database';
import { makePerson } from '../../fixtures/factories/person';
import { readMailedLink } from '../../fixtures/outbox';
import { request, signInAs } from '../../fixtures/request';

const EMAIL = 'ines@northmoor.example';

withDatabase();

async function signIn(): Promise<{ id: number; as: { cookie: string } }> {
	const { id } = await makePerson({ name: 'Mara Lindqvist', role: 'administrator', passwordHash: 'set' });
	return { id, as: { cookie: await signInAs(id) } };
}

function send(path: string, as: { cookie: string }, fields: Record<string, string>): Promise<Response> {
	return request('POST', path, { as, body: new URLSearchParams(fields) });
}

describe('the page of a person', () => {
	it('refuses to close the account of the last administrator and says why', async () => {
		const { id, as } = await signIn();
		const response = await send(`/people/${id}?/account`, as, { revision: '1', active: 'false' });
		expect(response.status).toBe(409);
		const { data } = await response.json();
		expect(data.values).toEqual({ part: 'account' });
		expect(data.problem.detail).toContain('Mara Lindqvist is the last administrator');
	});

	it('refuses a form of an older revision', async () => {
		const { as } = await signIn();
		const { id } = await makePerson({ name: 'Bo' });
		await send(`/people/${id}?/change`, as, { revision: '1', name: 'Bo', role: 'curator' });
		const late = await send(`/people/${id}?/change`, as, { revision: '1', name: 'Bo', role: 'reader' });
		expect(late.status).toBe(412);
		expect((await PersonModel.findByPk(id))?.role).toBe('curator');
	});

	it('closes an account and opens it again', async () => {
		const { as } = await signIn();
		const { id } = await makePerson();
		await send(`/people/${id}?/account`, as, { revision: '1', active: 'false' });
		expect(await (await request('GET', `/people/${id}`, { as })).json()).toMatchObject({
			person: { active: false, revision: 2 }
		});
		await send(`/people/${id}?/account`, as, { revision: '2', active: 'true' });
		expect((await PersonModel.findByPk(id))?.deactivatedAt).toBeNull();
	});

	it('is not there for a number that nobody has, nor for a word', async () => {
		const { as } = await signIn();
		expect((await request('GET', '/people/9999', { as })).status).toBe(404);
		expect((await request('GET', '/people/somebody', { as })).status).toBe(404);
	});
});

describe('the page of people', () => {
	it('gives back what was typed where an invitation does not fit', async () => {
		const { as } = await signIn();
		const response = await send('/people?/invite', as, { email: 'no address', role: 'reader' });
		expect(response.status).toBe(400);
		const { data } = await response.json();
		expect(data.values).toEqual({ email: 'no address', role: 'reader', part: 'invite' });
		expect(data.issues).toHaveProperty('email');
	});

	it('invites, whereupon the link can be read in the outbox and used', async () => {
		const { as } = await signIn();
		expect((await send('/people?/invite', as, { email: EMAIL, role: 'curator' })).status).toBe(200);
		await deliverDue();
		const outbox = await (await request('GET', '/outbox', { as })).json();
		expect(outbox.page.items).toMatchObject([{ recipient: EMAIL, state: 'kept' }]);
		const mail = await (await request('GET', `/outbox/${outbox.page.items[0].id}`, { as })).json();
		const link = await readMailedLink(EMAIL);
		expect(mail.mail.text).toContain(`${mail.origin}${link}`);
		expect(await (await request('GET', link)).json()).toMatchObject({ email: EMAIL, role: 'curator' });
	});
});

describe('the page of settings', () => {
	it('takes nothing as: files are kept for good', async () => {
		const { as } = await signIn();
		await send('/settings?/retention', as, { revision: '1', evidenceDays: '90' });
		const cleared = await send('/settings?/retention', as, { revision: '2', evidenceDays: '' });
		expect((await cleared.json()).data.done).toBe('Files are kept for good.');
		const page = await (await request('GET', '/settings', { as })).json();
		expect(page.settings).toEqual({ evidenceDays: null, revision: 3 });
	});

	it('gives back a number of days that does not fit', async () => {
		const { as } = await signIn();
		const response = await send('/settings?/retention', as, { revision: '1', evidenceDays: '3' });
		expect(response.status).toBe(400);
		expect((await response.json()).data).toMatchObject({
			values: { evidenceDays: '3', part: 'retention' },
			issues: { evidenceDays: expect.stringContaining('30') }
		});
	});
});

describe('the page of the audit trail', () => {
	it('shows everything where a filter does not fit, and says so', async () => {
		const { as } = await signIn();
		await send('/settings?/retention', as, { revision: '1', evidenceDays: '90' });
		const page = await (await request('GET', '/audit?from=yesterday', { as })).json();
		expect(page.issues).toMatchObject([{ field: 'from' }]);
		expect(page.page.total).toBe(1);
	});
});
