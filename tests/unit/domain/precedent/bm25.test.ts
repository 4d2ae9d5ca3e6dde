import { describe, expect, it } from 'vitest';
import { plainIdf, positiveIdf, scoreTexts, weighTerm } from '$lib/domain/precedent/bm25';

describe('weighTerm', () => {
	// Croft, Metzler, Strohman, "Search Engines", 2010, section 7.2.2: N = 500,000, two terms in 40,000 and 300
	// documents, 15 and 25 times in one of 0.9 times the average length. Unrounded 5.003 + 15.622.
	it('gives 20.625 for the worked example of the textbook', () => {
		const first = weighTerm(plainIdf(500_000, 40_000), 15, 0.9);
		const second = weighTerm(plainIdf(500_000, 300), 25, 0.9);
		expect(first).toBeCloseTo(5.003, 3);
		expect(second).toBeCloseTo(15.622, 3);
		expect(first + second).toBeCloseTo(20.625, 3);
	});
});

describe('positiveIdf', () => {
	it('stays above 0 where the plain one turns negative, and falls as more documents hold the term', () => {
		expect(plainIdf(10, 8)).toBeLessThan(0);
		expect(positiveIdf(10, 8)).toBeGreaterThan(0);
		expect(positiveIdf(10, 8)).toBeLessThan(positiveIdf(10, 2));
	});
});

describe('scoreTexts', () => {
	const texts = new Map([
		[1, ['crane', 'slot', 'crane']],
		[2, ['crane', 'yard', 'map']],
		[3, ['invoice']]
	]);

	it('leaves out texts without any of the terms', () => {
		expect([...scoreTexts(['zeppelin'], texts)]).toEqual([]);
		expect([...scoreTexts(['crane'], texts).keys()]).toEqual([1, 2]);
	});

	it('scores more occurrences higher, and a term asked for twice twice', () => {
		const once = scoreTexts(['crane'], texts);
		expect(once.get(1)).toBeGreaterThan(once.get(2) ?? 0);
		expect(scoreTexts(['crane', 'crane'], texts).get(2)).toBeCloseTo(2 * (once.get(2) ?? 0), 12);
	});
});
