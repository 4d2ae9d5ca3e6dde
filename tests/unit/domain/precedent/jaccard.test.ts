import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { rarityFrom } from '$lib/domain/precedent/features';
import { weigh, weightedJaccard } from '$lib/domain/precedent/jaccard';

const bag = (letters: string) => {
	const counts = new Map<string, number>();
	for (const letter of letters) counts.set(letter, (counts.get(letter) ?? 0) + 1);
	return counts;
};
const bags = fc
	.dictionary(fc.constantFrom('a', 'b', 'c', 'd', 'e'), fc.integer({ min: 1, max: 9 }))
	.map((counts) => new Map(Object.entries(counts)));

describe('weightedJaccard', () => {
	it('says nothing of two empty sets', () => {
		expect(weightedJaccard(new Map(), new Map())).toBeNull();
	});

	it('gives 3/8 for 3 common of 8 (Leskovec, Rajaraman, Ullman, Mining of Massive Datasets, exercise 3.1)', () => {
		const one = weigh(['a', 'b', 'c', 'd', 'e'], () => 1);
		const other = weigh(['c', 'd', 'e', 'f', 'g', 'h'], () => 1);
		expect(weightedJaccard(one, other)).toBe(3 / 8);
	});

	it('gives 3/6 for the bags aaab and aabbc (Ruzicka: sum of minima by sum of maxima)', () => {
		expect(weightedJaccard(bag('aaab'), bag('aabbc'))).toBe(0.5);
	});

	it('is symmetric, 1 for a set with itself, and between 0 and 1', () => {
		fc.assert(
			fc.property(bags, bags, (one, other) => {
				const likeness = weightedJaccard(one, other);
				expect(likeness).toBe(weightedJaccard(other, one));
				if (one.size > 0) expect(weightedJaccard(one, one)).toBe(1);
				if (likeness !== null) expect(likeness).toSatisfy((value: number) => value >= 0 && value <= 1);
			})
		);
	});
});

describe('rarityFrom', () => {
	it('is the inverse document frequency that stays positive: ln(1 + (N - n + 0.5) / (n + 0.5))', () => {
		const rarity = rarityFrom(
			new Map([
				['common', 90],
				['rare', 2]
			]),
			100
		);
		expect(rarity('common')).toBeCloseTo(Math.log(1 + 10.5 / 90.5), 12);
		expect(rarity('rare')).toBeCloseTo(Math.log(1 + 98.5 / 2.5), 12);
		expect(rarity('common')).toBeGreaterThan(0);
	});

	it('takes a feature that nobody has for as rare as one that a single incident has', () => {
		const rarity = rarityFrom(new Map([['single', 1]]), 100);
		expect(rarity('unknown')).toBe(rarity('single'));
	});
});
