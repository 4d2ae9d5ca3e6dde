import { describe, expect, test } from 'vitest';
import { columnStatistics, qualifiedName, quoteName, quoteText } from '$lib/domain/symptom/causes/confirm';

describe('quoteName', () => {
	// Manual, "Lexical Structure": unquoted names are folded to lower case; a quote inside is doubled.
	test.each([
		['invoice_line', 'invoice_line'],
		['Invoice', '"Invoice"'],
		['crew list', '"crew list"'],
		['a"b', '"a""b"'],
		['"Already"', '"Already"'],
		['1st', '"1st"'],
		['x; DROP TABLE y', '"x; DROP TABLE y"']
	])('writes %s as %s', (name, quoted) => {
		expect(quoteName(name)).toBe(quoted);
	});
});

describe('quoteText', () => {
	test('doubles quotes', () => {
		expect(quoteText("o'hara'; --")).toBe("'o''hara''; --'");
	});
});

describe('qualifiedName', () => {
	test('leaves the schema out where the plan names none', () => {
		expect(qualifiedName({ schema: null, name: 'invoice' })).toBe('invoice');
		expect(qualifiedName({ schema: 'Billing', name: 'invoice' })).toBe('"Billing".invoice');
	});
});

describe('columnStatistics', () => {
	test('asks for the columns named, or for all', () => {
		const table = { schema: null, name: 'invoice' };
		expect(columnStatistics(table, ['state', '"Kind"'])).toContain("attname IN ('state', 'Kind')");
		expect(columnStatistics(table, [])).not.toContain('attname IN');
	});
});
