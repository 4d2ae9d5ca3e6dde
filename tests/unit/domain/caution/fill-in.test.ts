import { describe, expect, it } from 'vitest';
import { fillIn, listBlanks } from '$lib/domain/caution/fill-in';

describe('listBlanks', () => {
	it('names each once, in order, over several texts', () => {
		expect(listBlanks(['analyze {{table}} ({{column}})', 'select * from {{ table }}'])).toEqual([
			'table',
			'column'
		]);
	});

	it('leaves out what is pasted whole, and dots', () => {
		expect(listBlanks(['explain select {{rest_of_the_query}}', 'set {{…}}'])).toEqual([]);
	});
});

describe('fillIn', () => {
	it('leaves a blank without a value as it is', () => {
		expect(fillIn('analyze {{table}} ({{column}})', { table: 'invoice_line', column: ' ' })).toBe(
			'analyze invoice_line ({{column}})'
		);
	});

	it('puts a value in as it stands, whatever it holds', () => {
		expect(fillIn('analyze {{table}}', { table: '"odd $& name"' })).toBe('analyze "odd $& name"');
	});
});
