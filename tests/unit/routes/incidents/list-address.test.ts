import { describe, expect, it } from 'vitest';
import { isSet, nextSort, sortedBy, withQuery } from '../../../../src/routes/(app)/incidents/list-address';

describe('withQuery', () => {
	it('takes a name out by null and leaves empty ones out', () => {
		const params = new URLSearchParams('state=open&q=&cursor=abc');
		expect(withQuery(params, { cursor: null })).toBe('?state=open');
		expect(withQuery(new URLSearchParams(), {})).toBe('?');
	});

	it('keeps a filter that is given several times', () => {
		const params = new URLSearchParams('state=open&state=contained');
		expect(withQuery(params, { sort: 'number' })).toBe('?state=open&state=contained&sort=number');
	});
});

describe('isSet', () => {
	it('does not take an empty field for a filter', () => {
		expect(isSet(new URLSearchParams('q=&service='), ['q', 'service'])).toBe(false);
		expect(isSet(new URLSearchParams('q=&service=a'), ['q', 'service'])).toBe(true);
	});
});

describe('nextSort', () => {
	it('begins with the worst, the newest, the highest', () => {
		expect(nextSort('number', 'severity')).toBe('severity');
		expect(nextSort('severity', 'startedAt')).toBe('-startedAt');
		expect(nextSort('severity', 'number')).toBe('-number');
	});

	it('turns round what is sorted already', () => {
		expect(nextSort('severity', 'severity')).toBe('-severity');
		expect(nextSort('-startedAt', 'startedAt')).toBe('startedAt');
	});
});

describe('sortedBy', () => {
	it('answers in the words of aria-sort', () => {
		expect(sortedBy('number', 'number')).toBe('ascending');
		expect(sortedBy('-number', 'number')).toBe('descending');
		expect(sortedBy('-number', 'severity')).toBeNull();
	});
});
