import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { hasFilters, parseQuery } from '$lib/domain/search/parse-query';

const NOW = new Date('2026-03-14T15:09:00.000Z');
const parse = (line: string) => parseQuery(line, NOW);

describe('parseQuery', () => {
	it('takes a filter that it cannot make sense of for words', () => {
		expect(parse('state:xyz since:soon colour:red').words).toEqual(['state xyz', 'since soon', 'colour red']);
		expect(hasFilters(parse('state:xyz since:soon colour:red since:2026-02-31'))).toBe(false);
	});

	it('finds nothing to ask for in an empty line', () => {
		expect(parse('  ')).toMatchObject({ words: [], phrases: [], excluded: [], number: null });
	});

	it('tells words, phrases and exclusions apart', () => {
		expect(parse('slow "hash join" -lock -"dead lock" report')).toMatchObject({
			words: ['slow', 'report'],
			phrases: ['hash join'],
			excluded: ['lock', 'dead lock']
		});
	});

	it('reads a phrase whose end is not typed yet', () => {
		expect(parse('slow "hash jo').phrases).toEqual(['hash jo']);
	});

	it('keeps a hyphen inside a word from excluding anything', () => {
		expect(parse('month-end batch')).toMatchObject({ words: ['month-end', 'batch'], excluded: [] });
	});

	it('reads filters in any case, several of one kind, values in quotes and beginnings of ids', () => {
		const { filters, words } = parse(
			'State:open state:resol Service:"berth planner" engine:maria symptom:hash'
		);
		expect(words).toEqual([]);
		expect(filters).toMatchObject({
			states: ['open', 'resolved'],
			services: ['berth planner'],
			engines: ['mariadb'],
			symptoms: ['hash-spill']
		});
	});

	it('takes an exact id before the ids that begin like it', () => {
		expect(parse('symptom:row-underestimate').filters.symptoms).toEqual(['row-underestimate']);
		expect(parse('symptom:row').filters.symptoms).toEqual(['row-underestimate', 'row-overestimate']);
	});

	it('reads days, months, years and days ago, up to the end of the day named', () => {
		expect(parse('since:2026-03-01 until:2026-03-02').filters).toMatchObject({
			since: '2026-03-01T00:00:00.000Z',
			until: '2026-03-03T00:00:00.000Z'
		});
		expect(parse('since:2026-02').filters.since).toBe('2026-02-01T00:00:00.000Z');
		expect(parse('since:14d').filters.since).toBe('2026-02-28T00:00:00.000Z');
		expect(parse('since:today').filters.since).toBe('2026-03-14T00:00:00.000Z');
	});

	it('reads a number alone on the line as an incident, and no other', () => {
		expect(parse(' #412 ').number).toBe(412);
		expect(parse('412').number).toBe(412);
		expect(parse('412 hash').number).toBeNull();
	});

	it('reads whatever is typed', () => {
		fc.assert(
			fc.property(fc.string({ unit: 'binary', maxLength: 600 }), (line) => {
				const query = parse(line);
				expect(query.words.every((word) => word.trim() !== '')).toBe(true);
			})
		);
	});
});
