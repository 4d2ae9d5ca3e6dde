import { describe, expect, it } from 'vitest';
import { differences, toEditValues } from '../../../../src/routes/(app)/incidents/[number]/edit-values';
import type { IncidentSummary } from '../../../../src/lib/domain/incident/incident';

const incident: IncidentSummary = {
	number: 412,
	title: 'Month-end invoice preview',
	narrative: 'Two lines\nof story.',
	service: null,
	engine: 'postgresql',
	engineVersion: '15.18',
	database: null,
	severity: 2,
	state: 'open',
	owner: null,
	origin: 'person',
	startedAt: '2026-12-01T00:40:12.345Z',
	detectedAt: null,
	containedAt: null,
	resolvedAt: null,
	cause: null,
	resolution: null,
	labels: ['month-end', 'invoice'],
	revision: 3,
	createdAt: '2026-12-01T01:05:00.000Z',
	createdBy: null,
	updatedAt: '2026-12-01T01:05:00.000Z',
	symptoms: [],
	recurrence: null,
	mergedInto: null
};

describe('toEditValues', () => {
	it("writes times in the reader's zone and nothing where nothing is known", () => {
		const values = toEditValues(incident, 'Europe/Oslo');
		expect(values.startedAt).toBe('2026-12-01T01:40');
		expect([values.service, values.detectedAt, values.cause]).toEqual(['', '', '']);
		expect(values.labels).toBe('month-end, invoice');
	});
});

describe('differences', () => {
	const now = toEditValues(incident, 'UTC');

	it('finds none in a form that was sent as it was drawn, whatever its line ends', () => {
		expect(differences({ ...now, narrative: 'Two lines\r\nof story.' }, now)).toEqual([]);
	});

	it('names the fields that say something else, and leaves out those that the form did not hold', () => {
		expect(differences({ title: 'Another', severity: '2' }, now)).toEqual(['title']);
	});
});
