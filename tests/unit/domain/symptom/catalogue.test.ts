import { describe, expect, test } from 'vitest';
import { CAUSE_CATALOGUE, SYMPTOM_CATALOGUE } from '$lib/domain/symptom/catalogue';
import { RULES } from '$lib/domain/symptom/rule-list';
import { CAUSE_IDS, SYMPTOM_IDS } from '$lib/domain/symptom/symptom';

describe('SYMPTOM_CATALOGUE', () => {
	test('defines every symptom under its own id, with what to look for', () => {
		expect(Object.keys(SYMPTOM_CATALOGUE).sort()).toEqual([...SYMPTOM_IDS].sort());
		for (const id of SYMPTOM_IDS) {
			const { title, what, recognise, usualCauses } = SYMPTOM_CATALOGUE[id];
			expect(SYMPTOM_CATALOGUE[id].id).toBe(id);
			expect([title, what, recognise].every((text) => text.length > 8)).toBe(true);
			expect(usualCauses.every((cause) => CAUSE_IDS.includes(cause))).toBe(true);
		}
	});

	test('gives every threshold a name, a unit and a reason', () => {
		const thresholds = SYMPTOM_IDS.flatMap((id) => SYMPTOM_CATALOGUE[id].thresholds);
		expect(thresholds.length).toBeGreaterThan(20);
		for (const { name, unit, why } of thresholds)
			expect([name, unit, why].map((text) => text.length > 1)).toEqual([true, true, true]);
	});

	test('gives each rule’s symptoms a definition, and no symptom two rules', () => {
		const ids = RULES.flatMap((rule) => rule.ids);
		expect(new Set(ids).size).toBe(ids.length);
	});
});

describe('CAUSE_CATALOGUE', () => {
	test('defines every cause under its own id', () => {
		expect(Object.keys(CAUSE_CATALOGUE).sort()).toEqual([...CAUSE_IDS].sort());
		for (const id of CAUSE_IDS) expect(CAUSE_CATALOGUE[id].id).toBe(id);
	});
});
