import { describe, expect, it } from 'vitest';
import { findFreeSlug, slugOf } from '$lib/domain/runbook/slug';

describe('slugOf', () => {
	it.each([
		['nothing but signs', '?! …', 'runbook'],
		['marks and capitals', 'Réduire  l’ÉCHANTILLON', 'reduire-l-echantillon'],
		['a path', '../../etc/passwd', 'etc-passwd']
	])('makes an address of %s', (_what, title, slug) => {
		expect(slugOf(title)).toBe(slug);
	});

	it('cuts a long title between words, and a long word where it must', () => {
		expect(slugOf('vacuum '.repeat(20))).toBe(
			'vacuum-vacuum-vacuum-vacuum-vacuum-vacuum-vacuum-vacuum-vacuum-vacuum'
		);
		expect(slugOf('v'.repeat(200))).toBe('v'.repeat(70));
	});
});

describe('findFreeSlug', () => {
	it('counts up from what is taken and leaves /runbooks/new to the form', () => {
		expect(findFreeSlug('Vacuum', new Set(['vacuum', 'vacuum-2']))).toBe('vacuum-3');
		expect(findFreeSlug('New', new Set())).toBe('new-2');
	});
});
