import { describe, expect, it } from 'vitest';
import { incidentFilter } from '$lib/domain/incident/incident-filter';

function fieldsOf(query: Record<string, unknown>): string[] {
	const read = incidentFilter.safeParse(query);
	return read.success ? [] : read.error.issues.map((issue) => issue.path.join('.'));
}

describe('incidentFilter', () => {
	it('refuses values that are none, each under its name', () => {
		expect(fieldsOf({ state: ['shut'], owner: 'somebody', from: 'soon', sort: 'mood', limit: 201 })).toEqual([
			'limit',
			'state.0',
			'owner',
			'from',
			'sort'
		]);
	});

	it('refuses a null character, at which the database would end the text', () => {
		expect(fieldsOf({ q: 'spill\0ed', service: ['a\0b'] })).toEqual(['service.0', 'q']);
	});

	it('asks for nothing where nothing is given', () => {
		expect(incidentFilter.parse({})).toEqual({
			limit: 50,
			state: [],
			severity: [],
			service: [],
			engine: [],
			symptom: [],
			sort: '-startedAt'
		});
	});

	it('counts a day to its end and turns an offset into UTC', () => {
		const read = incidentFilter.parse({ from: '2026-03-01T00:00:00+01:00', to: '2026-03-02' });
		expect(read).toMatchObject({ from: '2026-02-28T23:00:00.000Z', to: '2026-03-02T23:59:59.999Z' });
	});
});
