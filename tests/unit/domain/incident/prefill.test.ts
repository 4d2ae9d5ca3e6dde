import { describe, expect, it } from 'vitest';
import { prefillFrom, suggestTitle } from '../../../../src/lib/domain/incident/prefill';
import { makeOperator, makeOverflowingReading, makeReading } from '../../../fixtures/factories/reading';

const spills = {
	events: 16,
	files: 16,
	bytes: 68_059_955,
	statements: [
		{ fingerprint: 'f', text: 'select ?', files: 16, bytes: 68_059_955, firstAt: null, lastAt: null }
	]
};

describe('suggestTitle', () => {
	it('suggests nothing for evidence that shows nothing wrong', () => {
		expect(suggestTitle([])).toBeNull();
		expect(suggestTitle([makeReading()])).toBeNull();
	});

	it('does not call missing figures what is wrong', () => {
		const symptom = {
			id: 'no-runtime-figures' as const,
			operator: null,
			weight: 0.1,
			figures: {},
			summary: ''
		};
		expect(suggestTitle([makeReading({ symptoms: [symptom] })])).toBeNull();
	});

	it('names what overflows and where the estimate goes wrong', () => {
		expect(suggestTitle([makeOverflowingReading()])).toBe(
			'Hash join on invoice_no overflows (scan of invoice_line: 751 times the rows expected)'
		);
	});

	it('prefers the reading with a trail, in whatever order they were given', () => {
		const log = makeReading({ kind: 'log', name: 'server.log', spills });
		expect(suggestTitle([log, makeOverflowingReading()])).toMatch(/^Hash join/);
	});

	it('counts the temporary files of a log without a plan', () => {
		expect(suggestTitle([makeReading({ kind: 'log', spills })])).toBe(
			'16 temporary files, 64.9 MB, by one statement'
		);
	});

	it('names the heaviest symptom and its operator where there is no trail', () => {
		const root = makeOperator({ relation: 'yard_move' });
		const reading = makeReading({
			plan: { root, totalMs: null, planningMs: null, settings: {} },
			symptoms: [{ id: 'filter-discards-most', operator: '0', weight: 0.5, figures: {}, summary: '' }]
		});
		expect(suggestTitle([reading])).toBe('Filter discards most at scan of yard_move');
	});
});

describe('prefillFrom', () => {
	it('leaves every field alone without evidence', () => {
		expect(Object.values(prefillFrom([], null)).every((value) => value === null)).toBe(true);
	});

	it('says for each value where it was read', () => {
		const log = makeReading({ kind: 'log', name: 'server.log', spills, engineVersion: null });
		const hints = { applications: ['invoice-batch'], databases: ['invoice'], users: [] };
		const filled = prefillFrom([log, makeOverflowingReading()], hints);
		expect(filled.title?.from).toBe('plan.txt');
		expect(filled.service).toEqual({ value: 'invoice-batch', from: 'application name in server.log' });
		expect(filled.database).toEqual({ value: 'invoice', from: 'server.log' });
		expect(filled.engineVersion).toEqual({ value: '15.18', from: 'plan.txt' });
	});
});
