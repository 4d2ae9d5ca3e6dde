import { describe, expect, it } from 'vitest';
import { sayWhatItIs, sayWhatItShows } from '$lib/components/evidence/reading-words';
import { makeOverflowingReading, makeReading } from '../../../fixtures/factories/reading';

describe('sayWhatItIs', () => {
	it('says openly that something was not recognised', () => {
		expect(sayWhatItIs(makeReading({ kind: 'unknown', engine: 'unknown' }))).toBe('not recognised');
	});

	it('names engine, version and kind', () => {
		expect(sayWhatItIs(makeReading())).toBe('PostgreSQL 15.18 plan');
		expect(sayWhatItIs(makeReading({ kind: 'log', engineVersion: null }))).toBe('PostgreSQL log');
	});

	it('says of a plan without run-time figures that it holds estimates only', () => {
		const symptom = {
			id: 'no-runtime-figures',
			operator: null,
			weight: 0.1,
			figures: {},
			summary: ''
		} as const;
		expect(sayWhatItIs(makeReading({ symptoms: [symptom] }))).toBe('PostgreSQL 15.18 plan, estimates only');
	});
});

describe('sayWhatItShows', () => {
	it('gives the reason where nothing could be read', () => {
		const warnings = [{ code: 'empty', message: 'The file is empty.', at: null }];
		expect(sayWhatItShows(makeReading({ kind: 'unknown', warnings }))).toBe('The file is empty.');
	});

	it('names the symptoms, heaviest first', () => {
		expect(sayWhatItShows(makeOverflowingReading())).toBe('hash spill, row underestimate');
	});

	it('tells a healthy plan from a log that spilled nothing', () => {
		expect(sayWhatItShows(makeReading())).toBe('no symptom');
		const spills = { events: 0, files: 0, bytes: 0, statements: [] };
		expect(sayWhatItShows(makeReading({ kind: 'log', spills }))).toBe('no temporary files');
	});
});
