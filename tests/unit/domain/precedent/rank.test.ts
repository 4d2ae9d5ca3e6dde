import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { REASON_KINDS, type Candidate, type Question } from '$lib/domain/precedent/precedent';
import { rankPrecedents } from '$lib/domain/precedent/rank';
import { explain } from '$lib/domain/precedent/reasons';
import { SYMPTOM_IDS } from '$lib/domain/symptom/symptom';
import { makeCandidate, makeProfile, makeProfileSymptom } from '../../../fixtures/factories/precedent';

const even = () => 1;
const spill = makeProfileSymptom('hash-spill', { course: 'grown', operator: 'hash-build' });
const words: Question = { profile: makeProfile(), bestBm25: 10 };
const evidence: Question = { profile: makeProfile({ symptoms: [spill] }), bestBm25: 0 };

function numbersOf(question: Question, candidates: Candidate[], limit = 10): number[] {
	return rankPrecedents(question, candidates, even, { limit }).map(({ candidate }) => candidate.number);
}

describe('rankPrecedents', () => {
	it('leaves out whatever resembles in nothing, or in its setting alone', () => {
		const asked = { profile: makeProfile({ service: 'billing' }), bestBm25: 10 };
		expect(numbersOf(asked, [makeCandidate(1), makeCandidate(2, { service: 'billing' })])).toEqual([]);
	});

	it('works on words alone', () => {
		const candidates = [
			makeCandidate(1, {}, { bm25: 1 }),
			makeCandidate(2, {}, { bm25: 4 }),
			makeCandidate(3)
		];
		expect(numbersOf(words, candidates)).toEqual([2, 1]);
	});

	it('works on evidence alone', () => {
		const candidates = [
			makeCandidate(1, { symptoms: [makeProfileSymptom('sort-spill')] }),
			makeCandidate(2, { symptoms: [{ ...spill, course: 'planned' }] }),
			makeCandidate(3, { symptoms: [spill] })
		];
		expect(numbersOf(evidence, candidates)).toEqual([3, 2]);
	});

	it('puts the same fault in other words before the same words without it', () => {
		const asked = { ...evidence, bestBm25: 10 };
		const candidates = [makeCandidate(1, {}, { bm25: 5 }), makeCandidate(2, { symptoms: [spill] })];
		expect(numbersOf(asked, candidates)).toEqual([2, 1]);
	});

	it('breaks a tie by the outcome that is known, then by recency', () => {
		const at = (startedAt: string, hasOutcome: boolean, number: number) =>
			makeCandidate(number, { symptoms: [spill], startedAt }, { hasOutcome });
		const candidates = [
			at('2026-02-03T00:00:00.000Z', false, 1),
			at('2026-01-01T00:00:00.000Z', true, 2),
			at('2026-02-02T00:00:00.000Z', true, 3)
		];
		expect(numbersOf(evidence, candidates)).toEqual([3, 2, 1]);
	});

	it('does not show a refused pair first again, and lifts a confirmed one', () => {
		const judged = (number: number, verdict: Candidate['verdict'], weight: number) =>
			makeCandidate(number, { symptoms: [{ ...spill, weight }] }, { verdict });
		expect(numbersOf(evidence, [judged(1, 'not', 0.5), judged(2, null, 0.2)])).toEqual([2, 1]);
		const confirmed = makeCandidate(1, { symptoms: [{ ...spill, course: 'planned' }] }, { verdict: 'same' });
		const similar = makeCandidate(2, { symptoms: [{ ...spill, operator: 'hash-join' }] });
		expect(numbersOf(evidence, [similar, confirmed])).toEqual([1, 2]);
	});

	it('gives no more than asked for', () => {
		const candidates = [1, 2, 3].map((number) => makeCandidate(number, { symptoms: [spill] }));
		expect(numbersOf(evidence, candidates, 2)).toHaveLength(2);
	});

	const candidate = fc.record({
		bm25: fc.option(fc.double({ min: 0, max: 40, noNaN: true })),
		ids: fc.subarray([...SYMPTOM_IDS], { maxLength: 4 }),
		service: fc.constantFrom('billing', 'yard', null),
		verdict: fc.constantFrom('same' as const, 'related' as const, 'not' as const, null)
	});

	it('keeps every score within 0 and 1, and its contributions adding up to it', () => {
		fc.assert(
			fc.property(fc.array(candidate, { maxLength: 12 }), fc.boolean(), (rows, hasWords) => {
				const asked: Question = {
					profile: makeProfile({ symptoms: [spill, makeProfileSymptom('sort-spill')], service: 'billing' }),
					bestBm25: hasWords ? 12 : 0
				};
				const candidates = rows.map(({ bm25, ids, service, verdict }, number) =>
					makeCandidate(
						number,
						{ symptoms: ids.map((id) => makeProfileSymptom(id)), service },
						{ bm25, verdict }
					)
				);
				const ranked = rankPrecedents(asked, candidates, even, { limit: 20 });
				for (const { score, contributions } of ranked) {
					expect(score).toBeGreaterThan(0);
					expect(score).toBeLessThanOrEqual(1 + 1e-9);
					const sum = REASON_KINDS.reduce((total, kind) => total + contributions[kind], 0);
					expect(sum).toBeCloseTo(score, 9);
				}
				for (const row of ranked) {
					const reasons = explain(asked.profile, row, {
						at: '2026-03-01T00:00:00.000Z',
						terms: ['batch'],
						askedText: 'batch',
						text: 'batch',
						rarity: even
					});
					if (reasons.length === 0) continue;
					expect(reasons.reduce((total, reason) => total + reason.share, 0)).toBeCloseTo(1, 9);
				}
			})
		);
	});
});

describe('explain', () => {
	function reasonsFor(asked: Question, other: Candidate, context: { text?: string; terms?: string[] } = {}) {
		const [ranked] = rankPrecedents(asked, [other], even, { limit: 1 });
		if (ranked === undefined) throw new Error('Nothing was ranked.');
		return explain(asked.profile, ranked, {
			at: '2026-03-14T00:00:00.000Z',
			terms: context.terms ?? [],
			askedText: 'Month-end batch wrote temp files',
			text: context.text ?? '',
			rarity: even
		}).map((reason) => reason.text);
	}

	it('says that the statement is the same, and how long ago', () => {
		const asked = { profile: makeProfile({ fingerprints: ['0123456789abcdef'] }), bestBm25: 0 };
		const on = (startedAt: string) => makeCandidate(1, { fingerprints: ['0123456789abcdef'], startedAt });
		expect(reasonsFor(asked, on('2026-02-01T00:00:00.000Z'))).toEqual(['same statement, 41 days ago']);
		expect(reasonsFor(asked, on('2026-03-15T00:00:00.000Z'))).toEqual(['same statement, 1 day later']);
		expect(reasonsFor(asked, on('2026-03-14T02:00:00.000Z'))).toEqual(['same statement, the same day']);
	});

	it('names the symptoms that both have, their course, and the place where it is the same', () => {
		const begins = makeProfileSymptom('row-underestimate', {
			operator: 'seq-scan',
			relation: 'invoice_line'
		});
		const asked = { profile: makeProfile({ symptoms: [spill, begins] }), bestBm25: 0 };
		expect(reasonsFor(asked, makeCandidate(1, { symptoms: [spill, begins] }))).toEqual([
			'both: hash spill, grown, at a hash build; row underestimate at a seq scan of invoice_line'
		]);
	});

	it('names words as they were typed, and ideas in their own words', () => {
		const shown = reasonsFor(words, makeCandidate(1, { ideas: ['~spill'] }, { bm25: 5 }), {
			terms: ['month', 'batch', '~spill', 'end'],
			text: 'batches of the month spilled'
		});
		expect(shown).toEqual(['words: month, batch, temporary files']);
	});

	it('tells a confirmed cause from a likely one', () => {
		const causes = [{ id: 'stale-statistics' as const, confidence: 0.9, because: [] }];
		const asked = { profile: makeProfile({ causes }), bestBm25: 0 };
		expect(reasonsFor(asked, makeCandidate(1, { causes }))).toEqual([
			'likely cause of both: stale statistics'
		]);
		expect(reasonsFor(asked, makeCandidate(1, { causes, confirmedCause: 'stale-statistics' }))).toEqual([
			'its confirmed cause is likely here: stale statistics'
		]);
	});
});
