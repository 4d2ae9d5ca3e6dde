import { describe, expect, test } from 'vitest';
import { findToldInWords } from '$lib/domain/symptom/told-in-words';

const told = (text: string) => findToldInWords(text).map(({ figures }) => figures.symptom);

// Common practice, no source: the wordings are those of people on call.
describe('findToldInWords', () => {
	test.each([
		['Nothing spilled, estimate exact.'],
		['No temp files whatsoever.'],
		['Heap Fetches: 0.'],
		['It did not spill and there were no lossy blocks.'],
		['Batches: 1, all in memory.'],
		['']
	])('hears nothing in %j', (text) => {
		expect(told(text)).toEqual([]);
	});

	test.each([
		['The hash join spilled to disk.', 'hash-spill'],
		['disk full of temp files again', 'hash-spill'],
		['estimated 90 rows, got 500k', 'row-underestimate'],
		['Sort Method: external merge, 15 MB', 'sort-spill'],
		['HashAggregate, Batches: 21, Disk Usage: 15360kB', 'hash-spill'],
		['heap blocks exact and lossy both in the thousands', 'bitmap-lossy'],
		['Heap Fetches: 119 thousand and some', 'heap-fetches-high'],
		['OFFSET 300000 LIMIT 500', 'deep-offset'],
		['the driver got a generic plan', 'generic-plan'],
		['JIT total is more than half of the runtime', 'jit-dominates']
	])('hears in %j: %s', (text, symptom) => {
		expect(told(text)).toContain(symptom);
	});

	test('keeps the words and weighs little', () => {
		const [found] = findToldInWords('At 01:40 the sort went to disk.');
		expect(found).toMatchObject({
			id: 'told-in-words',
			operator: null,
			figures: { words: 'sort went to disk' }
		});
		expect(found?.weight).toBeLessThan(0.15);
	});

	test('names a symptom once', () => {
		expect(told('spilled, spilled and spilled')).toEqual(['hash-spill']);
	});
});
