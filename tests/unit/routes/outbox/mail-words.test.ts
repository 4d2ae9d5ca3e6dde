import { describe, expect, it } from 'vitest';
import { cutAtLinks } from '../../../../src/routes/(app)/outbox/mail-words';

const ORIGIN = 'https://catchwater.northmoor.example';

describe('cutAtLinks', () => {
	it.each([
		'https://elsewhere.example/invitation/abc',
		'https://catchwater.northmoor.example.elsewhere.example/x',
		'http://catchwater.northmoor.example/x',
		'javascript:alert(1)'
	])('makes no link of %s', (address) => {
		const pieces = cutAtLinks(`before ${address} after`, ORIGIN);
		expect(pieces.every(({ href }) => href === null)).toBe(true);
		expect(pieces.map(({ text }) => text).join('')).toBe(`before ${address} after`);
	});

	it('makes a link of an address of this installation and keeps the text round it', () => {
		const link = `${ORIGIN}/invitation/abc`;
		expect(cutAtLinks(`Here:\n\n${link}\n\nBye`, ORIGIN)).toEqual([
			{ text: 'Here:\n\n', href: null },
			{ text: link, href: link },
			{ text: '\n\nBye', href: null }
		]);
	});
});
