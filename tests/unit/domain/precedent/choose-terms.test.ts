import { describe, expect, it } from 'vitest';
import { chooseTerms, DOCUMENTS_BUDGET, listTerms, RAREST_WORDS } from '$lib/domain/precedent/choose-terms';

describe('listTerms', () => {
	it('leaves figures out and names each term once', () => {
		expect(listTerms('4096 files, 4MB, 4096 Files in yard_move')).toEqual([
			'fil',
			'yard',
			'mov',
			'yard_move'
		]);
	});
});

describe('chooseTerms', () => {
	const counts = (table: Record<string, number>) => (term: string) => table[term] ?? 0;

	it('chooses nothing where no document has any of the words', () => {
		expect(chooseTerms(['berth', 'quay'], () => 0, 100)).toEqual({ terms: [], asked: [], weight: 0 });
	});

	it('leaves out words that most documents have, but never the ideas', () => {
		const chosen = chooseTerms(
			['berth', 'slow', '~spill'],
			counts({ berth: 2, slow: 800, '~spill': 800 }),
			1000
		);
		expect(chosen.terms).toEqual(['berth', '~spill']);
	});

	it('asks for any word in a small collection, where none is rare', () => {
		expect(chooseTerms(['berth'], counts({ berth: 4 }), 5).terms).toEqual(['berth']);
	});

	it('takes the rarest of a long text, and the words of the trade beside them', () => {
		const rare = Array.from({ length: 40 }, (_, i) => `word${i}`);
		const table = Object.fromEntries(rare.map((word, i) => [word, i + 1]));
		const chosen = chooseTerms([...rare, 'hash'], counts({ ...table, hash: 45 }), 100);
		expect(chosen.terms).toEqual([...rare.slice(0, RAREST_WORDS), 'hash']);
	});

	it('stops before the terms lead to more documents than the budget', () => {
		const most = DOCUMENTS_BUDGET;
		const chosen = chooseTerms(
			['quay', 'berth', 'hash'],
			counts({ quay: 5, berth: most - 10, hash: most }),
			most * 10
		);
		expect(chosen.terms).toEqual(['quay', 'berth']);
	});

	it('asks for an idea twice, so that it counts twice', () => {
		expect(chooseTerms(['quay', '~spill'], counts({ quay: 1, '~spill': 2 }), 100).asked).toEqual([
			'quay',
			'~spill',
			'~spill'
		]);
	});
});
