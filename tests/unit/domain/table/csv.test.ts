import { describe, expect, it } from 'vitest';
import { writeCsvRecord } from '$lib/domain/table/csv';

// RFC 4180 section 2: CRLF ends a record; quotes round a field with commas, quotes or breaks, and doubled in it.
describe('writeCsvRecord', () => {
	it.each(['=1+1', '+1', '-1+1', '@SUM(A1)', '\tx', '\rx'])(
		'leads %j by an apostrophe, so that no spreadsheet runs it',
		(text) => {
			expect(writeCsvRecord([text])).toMatch(/^"?'/);
		}
	);

	it('quotes what would end a field or a record', () => {
		expect(writeCsvRecord(['a,b', 'say "so"', 'two\nlines', 'plain'])).toBe(
			'"a,b","say ""so""","two\nlines",plain\r\n'
		);
	});

	it('leaves numbers as they are and nothing where nothing is known', () => {
		expect(writeCsvRecord([-3, null, 0.5, ''])).toBe('-3,,0.5,\r\n');
	});
});
