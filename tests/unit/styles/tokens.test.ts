import { readFileSync } from 'node:fs';
import { describe, expect, it } from 'vitest';

const css = readFileSync(new URL('../../../src/lib/styles/tokens/colour.css', import.meta.url), 'utf8');
const tokens = new Map(
	[...css.matchAll(/--(\w+): light-dark\((#\w{6}), (#\w{6})\)/g)].map((found) => [
		found[1] ?? '',
		{ day: found[2] ?? '', night: found[3] ?? '' }
	])
);

/** Relative luminance of sRGB: WCAG 2.2, definition of relative luminance. */
function luminance(hex: string): number {
	const [r = 0, g = 0, b = 0] = [1, 3, 5].map((at) => {
		const channel = parseInt(hex.slice(at, at + 2), 16) / 255;
		return channel <= 0.04045 ? channel / 12.92 : ((channel + 0.055) / 1.055) ** 2.4;
	});
	return 0.2126 * r + 0.7152 * g + 0.0722 * b;
}

/** Contrast ratio of two colours: WCAG 2.2, definition of contrast ratio. */
function contrast(a: string, b: string): number {
	const [light = 0, dark = 0] = [luminance(a), luminance(b)].sort((x, y) => y - x);
	return (light + 0.05) / (dark + 0.05);
}

const grounds = ['mist', 'sheet', 'silt'];
const texts = ['ink', 'ink2', 'water', 'deep', 'flood', 'amber', 'moss', 'iris'];

describe.each(['day', 'night'] as const)('the colours of the %s', (scheme) => {
	const colour = (name: string) => tokens.get(name)?.[scheme] ?? '#000000';

	// WCAG 2.2, 1.4.3 Contrast (Minimum).
	it.each(texts.flatMap((text) => grounds.map((ground) => [text, ground] as const)))(
		'let %s be read on %s',
		(text, ground) => {
			expect(contrast(colour(text), colour(ground))).toBeGreaterThanOrEqual(4.5);
		}
	);

	// WCAG 2.2, 1.4.11 Non-text Contrast.
	it.each(grounds)('let an edge be seen on %s', (ground) => {
		expect(contrast(colour('edge'), colour(ground))).toBeGreaterThanOrEqual(3);
	});

	it('let the words of a main button be read', () => {
		expect(contrast(colour('sheet'), colour('water'))).toBeGreaterThanOrEqual(4.5);
		expect(contrast(colour('sheet'), colour('deep'))).toBeGreaterThanOrEqual(4.5);
	});
});
