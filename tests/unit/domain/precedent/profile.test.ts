import { describe, expect, it } from 'vitest';
import {
	NO_EVIDENCE,
	NOTHING_TOLD,
	profileEvidence,
	profileOf,
	profileWords
} from '$lib/domain/precedent/profile';
import { featuresOf } from '$lib/domain/precedent/features';
import { makeOperator, makeOverflowingReading, makeReading } from '../../../fixtures/factories/reading';

const FIELDS = { service: null, engine: null, database: null, startedAt: null, cause: null };

describe('profileEvidence', () => {
	it('finds nothing in no readings, and no feature leads to it', () => {
		expect(profileEvidence([])).toEqual(NO_EVIDENCE);
		expect(featuresOf(NO_EVIDENCE)).toEqual([]);
	});

	it('draws symptoms with their place, causes with their grounds, relations, path and traits', () => {
		const profile = profileEvidence([makeOverflowingReading()]);
		expect(profile.symptoms[0]).toMatchObject({
			id: 'hash-spill',
			magnitude: 8,
			operator: 'hash-join',
			told: false
		});
		expect(profile.symptoms[1]).toMatchObject({
			id: 'row-underestimate',
			magnitude: 750.5,
			operator: 'seq-scan',
			relation: 'invoice_line'
		});
		expect(profile.causes).toEqual([
			{ id: 'stale-statistics', confidence: 0.86, because: ['row-underestimate'] }
		]);
		expect(profile.fingerprints).toEqual(['0123456789abcdef']);
		expect([...profile.relations].sort()).toEqual(['invoice', 'invoice_line']);
		expect(profile.shapes).toEqual(['seq-scan>hash-join>sort']);
		expect(profile.traits).toEqual(
			expect.arrayContaining(['begins-at:seq-scan', 'begins-under:one-predicate', 'overflows-at:hash-join'])
		);
	});

	it('counts one plan saved in several forms once', () => {
		const asJson = { ...makeOverflowingReading(), format: 'postgres-json' as const };
		const asText = { ...makeOverflowingReading(), format: 'postgres-text' as const };
		expect(profileEvidence([asJson, asText])).toEqual(profileEvidence([asJson]));
	});

	it('keeps of one symptom at several operators the heaviest', () => {
		const light = {
			id: 'sort-spill' as const,
			operator: null,
			weight: 0.2,
			figures: { diskKb: 10 },
			summary: ''
		};
		const heavy = { ...light, weight: 0.9, figures: { diskKb: 90_000 } };
		const profile = profileEvidence([makeReading({ symptoms: [light, heavy] })]);
		expect(profile.symptoms).toHaveLength(1);
		expect(profile.symptoms[0]).toMatchObject({ weight: 0.9, magnitude: 90_000 });
	});

	it('forgets the lack of run-time figures where another form of the plan has them', () => {
		const lack = {
			id: 'no-runtime-figures' as const,
			operator: null,
			weight: 0.15,
			figures: {},
			summary: ''
		};
		const bare = makeReading({
			plan: { root: makeOperator(), totalMs: null, planningMs: null, settings: {} },
			symptoms: [lack]
		});
		expect(profileEvidence([bare]).symptoms.map((symptom) => symptom.id)).toEqual(['no-runtime-figures']);
		const both = profileEvidence([bare, makeOverflowingReading()]);
		expect(both.symptoms.map((symptom) => symptom.id)).not.toContain('no-runtime-figures');
	});
});

describe('profileOf', () => {
	const told = profileWords('Heap Blocks: lossy=4000, most of them rechecked.', null);

	it('takes symptoms from the words where no plan shows any, and marks them', () => {
		const profile = profileOf(FIELDS, NO_EVIDENCE, told);
		expect(profile.symptoms).toMatchObject([{ id: 'bitmap-lossy', told: true }]);
	});

	it('leaves out what the words fear where a plan ran', () => {
		const profile = profileOf(FIELDS, profileEvidence([makeOverflowingReading()]), told);
		expect(profile.symptoms.map((symptom) => symptom.id)).toEqual(['hash-spill', 'row-underestimate']);
	});

	it('takes a cause for confirmed only when it is one of the catalogue', () => {
		const confirm = (cause: string) =>
			profileOf({ ...FIELDS, cause }, NO_EVIDENCE, NOTHING_TOLD).confirmedCause;
		expect(confirm('stale-statistics')).toBe('stale-statistics');
		expect(confirm('the moon')).toBeNull();
	});
});

describe('profileWords', () => {
	it('tells nothing of a text about something else', () => {
		expect(profileWords('The lamp of the lighthouse is out.', null)).toEqual(NOTHING_TOLD);
	});

	it('tells the cause whose remedy the resolution names from one that the narrative names', () => {
		const { toldCauses } = profileWords(
			'Heap fetches as many as rows.',
			'Nobody had vacuumed. Built an index: create index on booking (customer_id).'
		);
		expect(toldCauses).toEqual([
			{ id: 'missing-index', isRemedied: true },
			{ id: 'stale-visibility-map', isRemedied: false }
		]);
	});
});
