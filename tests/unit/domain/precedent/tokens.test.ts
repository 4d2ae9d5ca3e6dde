import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { stem } from '$lib/domain/precedent/stem';
import { findNames, findWords, stemsOf, termsOf } from '$lib/domain/precedent/tokens';

const wordsOf = (text: string) => [...findWords(text)].map((word) => word.text);

describe('findWords', () => {
	it('finds nothing in signs and spaces', () => {
		expect(wordsOf(' -- * "" \n ~ ()')).toEqual([]);
	});

	it('cuts names at underscores, dots and humps', () => {
		expect(wordsOf('yard_move.movedAt')).toEqual(['yard', 'move', 'moved', 'at']);
	});

	it('folds accents and case, and keeps letters of other scripts', () => {
		expect(wordsOf('Façade ÜBER ДАННЫЕ')).toEqual(['facade', 'uber', 'данные']);
	});

	it('says where each word stands, whatever the text', () => {
		fc.assert(
			fc.property(fc.string({ unit: 'binary' }), (text) => {
				let at = 0;
				for (const word of findWords(text)) {
					expect(word.start).toBeGreaterThanOrEqual(at);
					expect(word.end).toBeGreaterThan(word.start);
					expect(word.end).toBeLessThanOrEqual(text.length);
					at = word.end;
				}
			})
		);
	});
});

describe('findNames', () => {
	it('passes over plain words', () => {
		expect(findNames('A hash on disk. Twice.')).toEqual([]);
	});

	it('keeps a qualified name whole, and each part that is a name itself', () => {
		expect(findNames('on public.yard_move.moved_at now')).toEqual([
			'yard_move',
			'moved_at',
			'public.yard_move.moved_at'
		]);
	});
});

describe('termsOf', () => {
	it('puts names behind the stems, so that a phrase meets a name written either way', () => {
		expect(termsOf('scan of yard_move spilled')).toEqual(['scan', 'yard', 'mov', 'spill', 'yard_move']);
		expect(stemsOf('scans of yard move spilling')).toEqual(['scan', 'yard', 'mov', 'spill']);
	});

	it('yields no blank where a letter falls apart into a space and a mark', () => {
		expect(termsOf('\uFC5E spill')).toEqual(['spill']);
	});

	it('yields terms without a space or a sign that full-text search gives a meaning', () => {
		fc.assert(
			fc.property(fc.string({ unit: 'binary' }), (text) => {
				for (const term of termsOf(text)) expect(term).not.toMatch(/[\s"*^:()+~-]/);
			})
		);
	});
});

describe('stem', () => {
	it.each([
		['string', 'string'],
		['status', 'status'],
		['bus', 'bus'],
		['loss', 'loss'],
		['f81', 'f81']
	])('leaves %s as it is', (word, kept) => {
		expect(stem(word)).toBe(kept);
	});

	it.each([
		[['estimate', 'estimates', 'estimated', 'estimating', 'estimation']],
		[['spill', 'spills', 'spilled', 'spilling', 'spilt']],
		[['cache', 'caches', 'cached', 'caching']],
		[['query', 'queries']],
		[['batch', 'batches', 'batched']],
		[['plan', 'plans', 'planned', 'planning']],
		[['index', 'indexes', 'indices', 'indexed']],
		[['temp', 'tmp', 'temporary']],
		[['analyze', 'analyse', 'analyzed', 'analysed', 'analysis']]
	])('brings %j together', (words) => {
		expect(new Set(words.map(stem)).size).toBe(1);
	});

	it('keeps the terms of the trade apart', () => {
		expect(new Set(['plan', 'planner', 'hash', 'has', 'sort', 'sorting-key'].map(stem)).size).toBe(6);
	});
});
