import { describe, expect, it } from 'vitest';
import type { WatchedIncident } from '$lib/domain/watch/watch';
import { sayHowMany, writeHeading } from '../../../../src/routes/(app)/watch-words';

const free: WatchedIncident = {
	number: 1,
	title: 'Gate console slow',
	service: null,
	engine: null,
	engineVersion: null,
	severity: 3,
	state: 'open',
	revision: 1,
	owner: null,
	since: '2026-12-01T00:00:00.000Z',
	containedAt: null,
	overflow: null,
	next: { kind: 'take' }
};
const taken: WatchedIncident = { ...free, number: 2, owner: { id: 1, name: 'Ilse Marten' } };

describe('sayHowMany', () => {
	it('tells an empty installation from a quiet night', () => {
		expect(sayHowMany({ open: [], openTotal: 0, incidents: 0 })).toBe('Nothing has been logged yet.');
		expect(sayHowMany({ open: [], openTotal: 0, incidents: 9 })).toBe('Nothing is open.');
	});

	it('says how many need somebody, in the right number', () => {
		expect(sayHowMany({ open: [free], openTotal: 1, incidents: 1 })).toBe(
			'One incident is open. Nobody is on it.'
		);
		expect(sayHowMany({ open: [free, taken], openTotal: 2, incidents: 2 })).toBe(
			'Two incidents are open. One needs somebody.'
		);
		expect(sayHowMany({ open: [taken], openTotal: 1, incidents: 2 })).toBe(
			'One incident is open. Somebody is on it.'
		);
	});
});

describe('writeHeading', () => {
	it("is the weekday and the time in the reader's zone", () => {
		// 02:14 in Oslo is 01:14 UTC in winter.
		expect(writeHeading('2026-12-01T01:14:00Z', 'Europe/Oslo', true)).toBe('Tuesday, 02:14');
	});

	it('says UTC while the zone is not known', () => {
		expect(writeHeading('2026-12-01T01:14:00Z', 'UTC', false)).toBe('Tuesday, 01:14 UTC');
	});
});
