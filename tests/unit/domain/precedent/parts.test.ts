import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { compareCauses } from '$lib/domain/precedent/parts/cause';
import { compareSettings } from '$lib/domain/precedent/parts/setting';
import { compareStatements } from '$lib/domain/precedent/parts/statement';
import { compareSymptoms } from '$lib/domain/precedent/parts/symptoms';
import { compareByVerdict } from '$lib/domain/precedent/parts/verdict';
import { compareWords } from '$lib/domain/precedent/parts/words';
import { CAUSE_IDS, SYMPTOM_IDS } from '$lib/domain/symptom/symptom';
import { makeProfile, makeProfileSymptom } from '../../../fixtures/factories/precedent';

const even = () => 1;

describe('compareWords', () => {
	it('says nothing where no words were asked', () => {
		expect(compareWords(3, 0)).toBeNull();
	});

	it('grows with the score and stops at 1', () => {
		expect(compareWords(null, 10)).toBe(0);
		expect(compareWords(2, 10)).toBeCloseTo(0.4);
		expect(compareWords(50, 10)).toBe(1);
	});
});

describe('compareSymptoms', () => {
	const grown = makeProfileSymptom('hash-spill', { course: 'grown', operator: 'hash-build', magnitude: 8 });

	it('says nothing of two incidents without symptoms', () => {
		expect(compareSymptoms([], [], even)).toBeNull();
	});

	it('is 0 where they have no symptom in common', () => {
		expect(compareSymptoms([grown], [makeProfileSymptom('sort-spill')], even)).toBe(0);
	});

	it('counts a rare symptom in common for more than a common one', () => {
		const rarity = (feature: string) => (feature === 'symptom:bitmap-lossy' ? 4 : 1);
		const asked = [makeProfileSymptom('bitmap-lossy'), makeProfileSymptom('row-underestimate')];
		const rare = compareSymptoms(asked, [makeProfileSymptom('bitmap-lossy')], rarity);
		const common = compareSymptoms(asked, [makeProfileSymptom('row-underestimate')], rarity);
		expect(rare).toBeGreaterThan(common ?? 1);
		expect(rare).toBeCloseTo(4 / 5);
	});

	it.each([
		['took another course', { course: 'planned' as const }],
		['shows at another operator', { operator: 'hash-join' as const }],
		['lies decades apart', { magnitude: 80_000 }]
	])('counts a common symptom for less when it %s', (_what, change) => {
		const likeness = compareSymptoms([grown], [{ ...grown, ...change }], even);
		expect(likeness).toBeLessThan(1);
		expect(likeness).toBeGreaterThan(0);
	});

	it('takes nothing off for figures in the same decade, nor for what one of them does not know', () => {
		expect(compareSymptoms([grown], [{ ...grown, magnitude: 60 }], even)).toBe(1);
		expect(compareSymptoms([grown], [makeProfileSymptom('hash-spill')], even)).toBe(1);
	});

	it('counts a symptom only told of for less than one shown', () => {
		const told = makeProfileSymptom('hash-spill', { told: true });
		expect(compareSymptoms([grown], [told], even)).toBeLessThan(1);
	});

	it('is symmetric, between 0 and 1, and 1 for an incident with itself', () => {
		const symptoms = fc.uniqueArray(
			fc.record({
				id: fc.constantFrom(...SYMPTOM_IDS),
				weight: fc.double({ min: 0.05, max: 1, noNaN: true }),
				magnitude: fc.option(fc.double({ min: 0, max: 1e12, noNaN: true })),
				course: fc.constantFrom('planned' as const, 'grown' as const, null),
				operator: fc.constantFrom('sort' as const, 'hash-build' as const, null),
				relation: fc.constant(null),
				told: fc.boolean()
			}),
			{ selector: (symptom) => symptom.id, maxLength: 6 }
		);
		fc.assert(
			fc.property(symptoms, symptoms, (one, other) => {
				const likeness = compareSymptoms(one, other, even);
				expect(likeness ?? -1).toBeCloseTo(compareSymptoms(other, one, even) ?? -1, 9);
				if (likeness !== null) expect(likeness).toSatisfy((value: number) => value >= 0 && value <= 1 + 1e-9);
				if (one.length > 0) expect(compareSymptoms(one, one, even)).toBeCloseTo(1, 9);
			})
		);
	});
});

describe('compareCauses', () => {
	const because = ['hash-spill' as const];
	const memory = makeProfile({ causes: [{ id: 'undersized-memory', confidence: 0.8, because }] });

	it('says nothing where neither has a cause', () => {
		expect(compareCauses(makeProfile(), makeProfile(), even)).toBeNull();
	});

	it('is 0 for different causes and 1 for the same on the same grounds', () => {
		const index = makeProfile({ causes: [{ id: 'missing-index', confidence: 0.8, because: [] }] });
		expect(compareCauses(memory, index, even)).toBe(0);
		expect(compareCauses(memory, memory, even)).toBeCloseTo(1);
	});

	it('finds the same cause on other grounds only partly alike', () => {
		const sort = makeProfile({
			causes: [{ id: 'undersized-memory', confidence: 0.8, because: ['sort-spill'] }]
		});
		const likeness = compareCauses(memory, sort, even);
		expect(likeness).toBeGreaterThan(0);
		expect(likeness).toBeLessThan(0.7);
	});

	it('believes a cause that a person confirmed before what the rules had thought', () => {
		const causes = [
			{ id: 'undersized-memory' as const, confidence: 0.8, because },
			{ id: 'stale-statistics' as const, confidence: 0.5, because: ['row-underestimate' as const] }
		];
		const asked = makeProfile({ causes });
		const stale = makeProfile({ causes: [{ id: 'stale-statistics', confidence: 0.9, because: [] }] });
		const open = compareCauses(stale, asked, even) ?? 1;
		const confirmed = compareCauses(stale, makeProfile({ causes, confirmedCause: 'stale-statistics' }), even);
		expect(confirmed).toBeGreaterThan(open);
	});

	it('counts causes only told of for less than causes that evidence shows', () => {
		const told = makeProfile({ toldCauses: [{ id: 'undersized-memory', isRemedied: true }] });
		expect(compareCauses(memory, told, even)).toBeLessThan(compareCauses(memory, memory, even) ?? 0);
	});

	it('stays between 0 and 1 whatever is believed', () => {
		const causes = fc.uniqueArray(
			fc.record({
				id: fc.constantFrom(...CAUSE_IDS),
				confidence: fc.double({ min: 0, max: 1, noNaN: true }),
				because: fc.subarray([...SYMPTOM_IDS], { maxLength: 3 })
			}),
			{ selector: (cause) => cause.id, maxLength: 5 }
		);
		fc.assert(
			fc.property(causes, causes, (one, other) => {
				const likeness = compareCauses(makeProfile({ causes: one }), makeProfile({ causes: other }), even);
				if (likeness !== null) expect(likeness).toSatisfy((value: number) => value >= 0 && value <= 1);
			})
		);
	});
});

describe('compareStatements', () => {
	const asked = makeProfile({
		fingerprints: ['0123456789abcdef'],
		relations: ['invoice', 'invoice_line'],
		shapes: ['seq-scan>hash-build>hash-join'],
		traits: ['begins-at:seq-scan']
	});

	it('says nothing where one has neither plan nor statement', () => {
		expect(compareStatements(asked, makeProfile(), even)).toBeNull();
	});

	it('is 1 for the same statement, whatever its plan has become', () => {
		const other = makeProfile({ fingerprints: ['ffff000011112222', '0123456789abcdef'] });
		expect(compareStatements(asked, other, even)).toBe(1);
	});

	it('finds relations, path and traits in common, and stays below the same statement', () => {
		const twin = { ...asked, fingerprints: [] };
		const likeness = compareStatements(asked, twin, even) ?? 0;
		expect(likeness).toBeGreaterThan(0.5);
		expect(likeness).toBeLessThan(1);
		const cousin = makeProfile({ relations: ['invoice'], traits: ['begins-at:index-scan'] });
		expect(compareStatements(asked, cousin, even)).toBeLessThan(likeness);
	});
});

describe('compareSettings', () => {
	it('says nothing where nothing is known of the one asked about', () => {
		expect(
			compareSettings(makeProfile({ engine: 'unknown' }), makeProfile({ service: 'billing' }))
		).toBeNull();
	});

	it('counts what is the same over what is known, in any case', () => {
		const asked = makeProfile({ service: 'Billing', engine: 'postgresql' });
		expect(compareSettings(asked, makeProfile({ service: 'billing', engine: 'postgresql' }))).toBe(1);
		expect(compareSettings(asked, makeProfile({ service: 'yard', engine: 'postgresql' }))).toBe(0.5);
		expect(compareSettings(asked, makeProfile())).toBe(0);
	});
});

describe('compareByVerdict', () => {
	it('says nothing before anybody has judged, and ranks same over related over not', () => {
		expect(compareByVerdict(null)).toBeNull();
		const [same, related, not] = (['same', 'related', 'not'] as const).map(compareByVerdict);
		expect(same).toBeGreaterThan(related ?? 1);
		expect(related).toBeGreaterThan(not ?? 1);
		expect(not).toBe(0);
	});
});
