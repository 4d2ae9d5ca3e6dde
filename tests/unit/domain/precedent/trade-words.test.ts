import { describe, expect, it } from 'vitest';
import { CONCEPTS, findConcepts } from '$lib/domain/precedent/trade-words';

const ideasOf = (text: string) => findConcepts(text).map((concept) => concept.term);

describe('findConcepts', () => {
	it.each([
		['The log held not one temporary file line for that session.', '~spill'],
		['No spill any more.', '~spill'],
		['No relation to parallel query.', '~parallel-workers'],
		["It isn't the JIT.", '~jit'],
		['Nothing to do with heap blocks or rechecks.', '~lossy-bitmap']
	])('leaves out what %j denies', (text, term) => {
		expect(ideasOf(text)).not.toContain(term);
	});

	it.each([
		['It wrote temp files all night.', '~spill'],
		['The sort went to disk.', '~spill'],
		['external merge, 40 MB', '~spill'],
		['There is no index on the booking reference.', '~missing-index'],
		['Workers Planned: 4, Workers Launched: 1', '~parallel-workers'],
		['Not the memory this time, but the sort spilled anyway.', '~spill'],
		['Nothing slow. OFFSET 620000 though.', '~offset']
	])('hears what %j says', (text, term) => {
		expect(ideasOf(text)).toContain(term);
	});

	it('names each idea once, under a term that no text can hold', () => {
		const terms = CONCEPTS.map((concept) => concept.term);
		expect(new Set(terms).size).toBe(terms.length);
		expect(terms.filter((term) => !term.startsWith('~'))).toEqual([]);
		expect(ideasOf('spill spill spilled, temp files')).toEqual(['~spill']);
	});
});
