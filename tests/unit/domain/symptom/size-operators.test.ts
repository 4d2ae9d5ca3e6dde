import { describe, expect, test } from 'vitest';
import { interpret, listPlans, readExpected } from '../../../fixtures/symptom-plans';

interface Judged {
	name: string;
	kind: string;
	predictedKb: number;
	enoughKb: number;
	spillsAtKb: number;
}

const KINDS = ['hash', 'sort', 'aggregate'];

/** Every spill of the captured plans that was bisected on the live server, with the setting that is recommended for it. */
const JUDGED: Judged[] = listPlans().flatMap((name) => {
	const { minWorkMemKb = {}, stillSpillsAtKb = {} } = readExpected(name);
	const { sizing } = interpret(name);
	return KINDS.filter((kind) => minWorkMemKb[kind] !== undefined).flatMap((kind) => {
		const settings = sizing.filter((each) => each.kind === kind).map((each) => each.setting.valueKb);
		// A sort inside an aggregate prints no group sizes: nothing is recommended for it.
		if (settings.length === 0) return [];
		const predictedKb = Math.max(...settings);
		return [
			{ name, kind, predictedKb, enoughKb: minWorkMemKb[kind] ?? 0, spillsAtKb: stillSpillsAtKb[kind] ?? 0 }
		];
	});
});

describe('sizeOperators against bisection on PostgreSQL 15.18', () => {
	test('sizes all spills but the one inside an aggregate', () => {
		expect(JUDGED).toHaveLength(30);
	});

	test.each(JUDGED)(
		'recommends for the $kind of $name more than what was seen to spill',
		({ predictedKb, spillsAtKb }) => {
			expect(predictedKb).toBeGreaterThan(spillsAtKb);
		}
	);

	test('is within 15 % of the truth in the median and within 30 % at the 95th percentile', () => {
		const errors = JUDGED.map(({ predictedKb, enoughKb }) => Math.abs(predictedKb / enoughKb - 1)).sort(
			(a, b) => a - b
		);
		expect(errors[Math.ceil(errors.length * 0.5) - 1]).toBeLessThanOrEqual(0.15);
		expect(errors[Math.ceil(errors.length * 0.95) - 1]).toBeLessThanOrEqual(0.3);
	});

	test('gives the setting without the multiplier, what was given, and what the rule rests on', () => {
		const [sizing] = interpret('undersized-memory-004').sizing;
		expect(sizing).toMatchObject({ kind: 'hash', givenKb: 4096, batches: 8, setting: { name: 'work_mem' } });
		expect(sizing?.basis).toContain('nodeHash.c');
		expect(sizing?.neededKb).toBeGreaterThan((sizing?.setting.valueKb ?? 0) * 1.9);
	});

	test('shares a parallel hash over its processes and asks for one process fewer in a parallel sort', () => {
		expect(interpret('undersized-memory-006').sizing[0]?.basis).toContain('shared by 3 processes');
		expect(interpret('sort-spill-015').sizing[0]?.basis).toContain('one process fewer than the 3');
	});

	test('sizes nothing without figures', () => {
		expect(interpret('nested-loop-blowup-078').sizing).toEqual([]);
	});

	test('needs twice the work_mem where the multiplier is 1', () => {
		const one = interpret('undersized-memory-004', (_root, envelope) => {
			envelope.Settings = { work_mem: '2MB', hash_mem_multiplier: '1' };
		});
		const two = interpret('undersized-memory-004');
		expect((one.sizing[0]?.setting.valueKb ?? 0) / (two.sizing[0]?.setting.valueKb ?? 1)).toBeCloseTo(2, 1);
	});
});
