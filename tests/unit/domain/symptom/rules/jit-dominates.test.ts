import { describe, expect, test } from 'vitest';
import { findIn, type JsonNode } from '../../../../fixtures/symptom-plans';

const timing = (jitMs: number, totalMs: number) => (_root: JsonNode, envelope: JsonNode) => {
	envelope.JIT = { Functions: 10, Timing: { Total: jitMs } };
	envelope['Execution Time'] = totalMs;
};
const count = (jitMs: number, totalMs: number) =>
	findIn('jit-overhead-046', 'jit-dominates', timing(jitMs, totalMs)).length;

describe('jit-dominates', () => {
	test('needs 100 ms and 30 % of the execution', () => {
		expect(count(99, 120)).toBe(0);
		expect(count(100, 334)).toBe(0);
		expect(count(100, 333)).toBe(1);
	});

	test('gives times and share', () => {
		const [found] = findIn('jit-overhead-046', 'jit-dominates');
		expect(found?.figures.share).toBeGreaterThan(0.9);
		expect(found?.operator).toBeNull();
	});

	test('says nothing where compiling was not timed', () => {
		const untimed = findIn('jit-overhead-046', 'jit-dominates', (_root, envelope) => {
			envelope.JIT = { Functions: 10 };
		});
		expect(untimed).toEqual([]);
	});
});
