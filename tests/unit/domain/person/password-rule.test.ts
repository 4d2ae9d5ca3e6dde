import { describe, expect, it } from 'vitest';
import { findPasswordFault, PASSWORD_MIN_LENGTH } from '$lib/domain/person/password-rule';

const MARA = { name: 'Mara Lindqvist', email: 'mara.lindqvist@northmoor.example' };

describe('findPasswordFault', () => {
	it.each([
		['fourteen characters', 'a1b2c3d4e5f6g7'],
		['one character again and again', 'aaaaaaaaaaaaaaaaaaaa'],
		['a short piece again and again', 'abcabcabcabcabcabc'],
		['the commonest words in a row', 'Password123456789'],
		['a row of keys', 'qwertyuiopasdfghjkl'],
		['words tried first with a year', 'Welcome-Summer-2026!'],
		["the person's own name", 'Lindqvist.Mara.1984'],
		["the person's own address", 'mara.lindqvist@northmoor'],
		['more than 200 characters', 'otter gravel lantern '.repeat(10)]
	])('refuses %s', (_title, password) => {
		expect(findPasswordFault(password, MARA)).not.toBeNull();
	});

	it.each([
		['four words', 'lantern gravel otter nine'],
		['words with spaces and signs of other scripts', 'Straße über Ærø — 東京'],
		// NIST SP 800-63B-4 section 3.1.1.2: verifiers take at least 64.
		['64 characters out of a password manager', 'xK9v'.concat('QmZ7pL2wR8tB'.repeat(5))],
		['15 characters without a rule of composition', 'kqzvwmrtpjxhgnb']
	])('takes %s', (_title, password) => {
		expect(findPasswordFault(password, MARA)).toBeNull();
	});

	it('counts code points, not halves of them', () => {
		expect(findPasswordFault('🦦🪨🏮🌊⚓🚢🐚', MARA)).toContain(`at least ${PASSWORD_MIN_LENGTH}`);
	});
});
