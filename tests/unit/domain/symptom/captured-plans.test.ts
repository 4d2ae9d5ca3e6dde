import { describe, expect, test } from 'vitest';
import { interpret, listPlans, readExpected, readPlan } from '../../../fixtures/symptom-plans';
import { interpretPlan } from '$lib/domain/symptom/interpret-plan';

// The outside source is the running server (PostgreSQL 15.18) that the plans and the bisected settings come from.
const PLANS = listPlans();
const HEALTHY = PLANS.filter((name) => name.startsWith('healthy'));
const ILL = PLANS.filter((name) => !name.startsWith('healthy'));
const REPAIRED = ILL.filter((name) => readExpected(name).symptomsAfter !== undefined);

describe('interpretPlan on captured plans', () => {
	test.each(HEALTHY)('finds nothing in %s', (name) => {
		const { symptoms, trails, causes, sizing } = interpret(name);
		expect({ symptoms, trails, causes, sizing }).toEqual({
			symptoms: [],
			trails: [],
			causes: [],
			sizing: []
		});
	});

	test.each(ILL)('finds what %s shows, and nothing else', (name) => {
		const { symptoms, mayAlso } = readExpected(name);
		const found = new Set(interpret(name).symptoms.map(({ id }) => id));
		expect(symptoms.filter((id) => !found.has(id))).toEqual([]);
		expect([...found].filter((id) => !symptoms.includes(id) && !mayAlso.includes(id))).toEqual([]);
	});

	test.each(REPAIRED)('finds in the repaired plan of %s exactly what is left', (name) => {
		const found = new Set(interpret(name, undefined, 'after.plan.json').symptoms.map(({ id }) => id));
		expect([...found].sort()).toEqual([...(readExpected(name).symptomsAfter ?? [])].sort());
	});

	test('names the true cause first in four of five and within two nearly always', () => {
		const places = ILL.map((name) =>
			interpret(name).causes.findIndex(({ id }) => id === readExpected(name).likelyCauses[0])
		);
		expect(places.filter((place) => place === 0).length / ILL.length).toBeGreaterThanOrEqual(0.8);
		expect(places.filter((place) => place === 0 || place === 1).length / ILL.length).toBeGreaterThanOrEqual(
			0.95
		);
	});

	test('sorts symptoms and causes by weight and confidence, each within 0 and 1', () => {
		for (const name of ILL) {
			const { symptoms, causes } = interpret(name);
			const weights = symptoms.map(({ weight }) => weight);
			const confidences = causes.map(({ confidence }) => confidence);
			expect(weights).toEqual([...weights].sort((one, other) => other - one));
			expect(confidences).toEqual([...confidences].sort((one, other) => other - one));
			expect([...weights, ...confidences].every((figure) => figure > 0 && figure < 1)).toBe(true);
		}
	});

	test('gives the same answer twice and leaves the plan as it was', () => {
		const plan = readPlan('stale-statistics-001');
		const before = structuredClone(plan);
		expect(interpretPlan(plan, null)).toEqual(interpretPlan(plan, null));
		expect(plan).toEqual(before);
	});

	test('writes sentences without loose ends', () => {
		for (const name of ILL) {
			const { symptoms, trails } = interpret(name);
			for (const text of [
				...symptoms.map(({ summary }) => summary),
				...trails.map(({ sentence }) => sentence)
			]) {
				expect(text, name).toMatch(/^[A-Z0-9].*\.$/s);
				expect(text, name).not.toMatch(
					/undefined|null|NaN|Infinity| {2}|(?<![.,\d])1 (?:rows|batches|times|joins)\b/
				);
			}
		}
	});
});
