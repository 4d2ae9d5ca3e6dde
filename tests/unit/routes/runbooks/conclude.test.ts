import { describe, expect, it } from 'vitest';
import * as attempts from '$lib/server/incidents/attempts-service';
import * as runbooks from '$lib/server/runbooks/runbooks-service';
import { readSide } from '../../../fixtures/compare';
import { withDatabase } from '../../../fixtures/database';
import { makeIncident } from '../../../fixtures/factories/incident';
import { makeActor } from '../../../fixtures/factories/person';
import { request } from '../../../fixtures/request';
import { listDataFiles } from '../../../fixtures/spool';

withDatabase();

const RUNBOOK = 'keep-a-bitmap-exact';

async function begin() {
	await runbooks.adoptContent();
	const actor = await makeActor('responder');
	const incident = await makeIncident();
	const started = await attempts.start(actor, incident, { runbook: RUNBOOK });
	if (!started.ok) throw new Error(started.problem.detail);
	const { id } = started.value;
	const path = `/runbooks/${RUNBOOK}/follow?/conclude&incident=${incident}&attempt=${id}`;
	return { actor, incident, id, path };
}

/** The form as a browser sends it: every field, an empty file among them. */
function formOf(fields: Record<string, string>, file: File = new File([], '')): FormData {
	const body = new FormData();
	for (const [name, value] of Object.entries({ revision: '1', note: '', evidence: '', ...fields }))
		body.append(name, value);
	body.append('evidence', file);
	return body;
}

describe('recording the outcome', () => {
	it('asks for an outcome, and leaves no file behind', async () => {
		const { path } = await begin();
		const plan = new File([new Uint8Array(readSide('healthy-twice', 'before'))], 'after.json');
		const answer = await request('POST', path, { as: 'responder', body: formOf({ note: 'Quick.' }, plan) });
		expect(answer.status).toBe(400);
		const { data } = await answer.json();
		expect(data.issues.outcome).toBe('Say what came of it.');
		expect(data.values).toMatchObject({ note: 'Quick.' });
		expect(await listDataFiles('spool')).toEqual([]);
	});

	it('takes none for after where none is given', async () => {
		const { actor, incident, id, path } = await begin();
		const answer = await request('POST', path, { as: 'responder', body: formOf({ outcome: 'worked' }) });
		expect(answer.status).toBe(303);
		expect(await attempts.read(actor, incident, id)).toMatchObject({
			value: { outcome: 'worked', note: null, after: null }
		});
	});

	it('keeps the plan after it with the incident', async () => {
		const { actor, incident, id, path } = await begin();
		const plan = new File([new Uint8Array(readSide('healthy-twice', 'before'))], 'after.json');
		await request('POST', path, { as: 'responder', body: formOf({ outcome: 'worked' }, plan) });
		const read = await attempts.read(actor, incident, id);
		expect(read.ok && read.value.after).toBeGreaterThan(0);
		expect(await listDataFiles('spool')).toEqual([]);
	});
});
