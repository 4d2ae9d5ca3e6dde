import { describe, expect, it } from 'vitest';
import { suggestBlanks } from '$lib/server/follow/suggest-blanks';
import { makeOverflowingReading, makeReading } from '../../../fixtures/factories/reading';

describe('suggestBlanks', () => {
	it('suggests nothing where no plan was read', () => {
		expect(suggestBlanks([])).toEqual({});
		expect(suggestBlanks([{ readings: [makeReading({ kind: 'log' })] }])).toEqual({});
	});

	it('suggests the table where the misestimate begins', () => {
		expect(suggestBlanks([{ readings: [makeReading(), makeOverflowingReading()] }])).toEqual({
			table: 'invoice_line'
		});
	});

	it('falls back on the table of the heaviest symptom that names one', () => {
		const reading = { ...makeOverflowingReading(), trails: [] };
		expect(suggestBlanks([{ readings: [reading] }])).toEqual({ table: 'invoice_line' });
	});
});
