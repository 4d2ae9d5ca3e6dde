import { beforeEach, describe, expect, it } from 'vitest';
import { auditQuery } from '$lib/domain/audit/audit-query';
import { SYSTEM, type Actor } from '$lib/domain/person/person';
import * as audit from '$lib/server/audit/audit-service';
import { AuditModel } from '$lib/server/db/models/audit';
import { write } from '$lib/server/db/transaction';
import { withDatabase } from '../../../fixtures/database';
import { makeActor, makePerson } from '../../../fixtures/factories/person';
import { request } from '../../../fixtures/request';

withDatabase();

let ines: Actor;
beforeEach(async () => {
	ines = (await makePerson({ name: 'Ines Halvorsen', role: 'administrator' })).actor;
	await write(async (t) => {
		await audit.record(ines, 'incident.create', 'incident:1', { title: '=HYPERLINK("x")' }, t);
		await audit.record(ines, 'incident.update', 'incident:1', { fields: ['state'] }, t);
		await audit.record(SYSTEM, 'incident.update', 'incident:12', {}, t);
		await audit.record(SYSTEM, 'incidents-other.update', 'incidentx:1', {}, t);
	});
});

async function list(query: Record<string, unknown>): Promise<string[]> {
	const page = await audit.list(ines, auditQuery.parse(query));
	if (!page.ok) throw new Error(page.problem.detail);
	return page.value.items.map(({ action, subject }) => `${action} ${subject}`);
}

describe('list', () => {
	it.each(['reader', 'responder', 'curator'] as const)('refuses a %s', async (role) => {
		const actor = await makeActor(role);
		expect(await audit.list(actor, auditQuery.parse({}))).toMatchObject({ problem: { code: 'forbidden' } });
		expect(audit.exportCsv(actor, {})).toMatchObject({ problem: { code: 'forbidden' } });
		expect(await audit.listActions(actor)).toMatchObject({ problem: { code: 'forbidden' } });
	});

	it.each([{ person: '0' }, { action: "x' OR 1" }, { subject: 'incident:' }, { from: 'yesterday' }])(
		'takes no filter like %j',
		(query) => {
			expect(auditQuery.safeParse(query).success).toBe(false);
		}
	);

	it('narrows by person, and by the system', async () => {
		expect(await list({ person: String(ines.personId) })).toHaveLength(2);
		expect(await list({ person: 'system' })).toHaveLength(2);
	});

	it('narrows by an action, or by all of one kind and no other', async () => {
		expect(await list({ action: 'incident.create' })).toEqual(['incident.create incident:1']);
		expect(await list({ action: 'incident' })).toHaveLength(3);
	});

	it('narrows by a thing, or by all of one kind and no other', async () => {
		expect(await list({ subject: 'incident:1' })).toHaveLength(2);
		expect(await list({ subject: 'incident' })).toHaveLength(3);
	});

	it('narrows by a period, whose last day counts to its end', async () => {
		await write(() =>
			AuditModel.update({ at: '2026-03-02T23:30:00.000Z' }, { where: { subject: 'incident:12' } })
		);
		expect(await list({ from: '2026-03-01', to: '2026-03-02' })).toEqual(['incident.update incident:12']);
		expect(await list({ to: '2026-03-01' })).toEqual([]);
	});

	it('turns pages newest first without losing or repeating a line, also while lines are added', async () => {
		const first = await audit.list(ines, auditQuery.parse({ limit: 2 }));
		if (!first.ok) throw new Error(first.problem.detail);
		await write((t) => audit.record(ines, 'incident.update', 'incident:1', {}, t));
		const second = await audit.list(ines, auditQuery.parse({ limit: 2, cursor: first.value.next ?? '' }));
		if (!second.ok) throw new Error(second.problem.detail);
		const ids = [...first.value.items, ...second.value.items].map(({ id }) => id);
		expect(ids).toEqual([...ids].sort((a, b) => b - a));
		expect(new Set(ids).size).toBe(4);
		expect(second.value.next).toBeNull();
	});
});

describe('listActions', () => {
	it('names each action once', async () => {
		expect(await audit.listActions(ines)).toEqual({
			ok: true,
			value: ['incident.create', 'incident.update', 'incidents-other.update']
		});
	});
});

describe('the CSV of the trail', () => {
	it('holds the lines of the filter, of which none is run by a spreadsheet', async () => {
		const response = await request('GET', '/audit/csv?action=incident.create', { as: 'administrator' });
		expect(response.headers.get('content-type')).toContain('text/csv');
		expect(response.headers.get('content-disposition')).toContain('attachment');
		const [head, line, ...rest] = (await response.text()).split('\r\n');
		expect(head).toBe('number,at,person,name,via,action,subject,detail');
		expect(line).toContain('Ines Halvorsen,session,incident.create,incident:1');
		expect(rest).toEqual(['']);
	});
});
