import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { stemsOf } from '$lib/domain/precedent/tokens';
import { cutSnippet, matchesAny } from '$lib/domain/search/snippet';

const forWords = (words: string, beginnings: string[] = []) =>
	matchesAny(new Set(stemsOf(words)), beginnings);
const textOf = (snippet: { text: string }[]) => snippet.map((part) => part.text).join('');

describe('cutSnippet', () => {
	it('gives nothing of an empty text', () => {
		expect(cutSnippet(' \n ', forWords('hash'))).toEqual([]);
	});

	it('leaves markup as the plain text that it is', () => {
		expect(cutSnippet('<b>hash</b> & co', forWords('hash'))).toEqual([
			{ text: '<b>', mark: false },
			{ text: 'hash', mark: true },
			{ text: '</b> & co', mark: false }
		]);
	});

	it('marks every form of a word, and words that begin like the one being typed', () => {
		const marked = cutSnippet('Hashes spilled in yard_move', forWords('hash spilling', ['mov']))
			.filter((part) => part.mark)
			.map((part) => part.text);
		expect(marked).toEqual(['Hashes', 'spilled', 'move']);
	});

	it('shows the part of a long text that holds most of the words, with dots where it was cut', () => {
		const text = `hash ${'and so on '.repeat(60)}the hash join spilled to disk ${'and so on '.repeat(60)}`;
		const snippet = cutSnippet(text, forWords('hash join spilled'));
		expect(textOf(snippet)).toMatch(/^… .*hash join spilled to disk.* …$/);
		expect(snippet.filter((part) => part.mark).map((part) => part.text)).toEqual(['hash', 'join', 'spilled']);
	});

	it('shows the beginning where no word is met', () => {
		expect(cutSnippet('The beginning of it', forWords('hash'))).toEqual([
			{ text: 'The beginning of it', mark: false }
		]);
	});

	it('never adds to the text anything but dots', () => {
		fc.assert(
			fc.property(fc.lorem({ maxCount: 80 }), fc.lorem({ maxCount: 2 }), (text, words) => {
				const shown = textOf(cutSnippet(text, forWords(words)))
					.replace(/^… /, '')
					.replace(/ …$/, '');
				expect(text.replaceAll(/\s+/g, ' ').trim()).toContain(shown.trim());
			})
		);
	});
});
