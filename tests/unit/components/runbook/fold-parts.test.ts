import { describe, expect, it } from 'vitest';
import { foldParts } from '$lib/components/runbook/fold-parts';

const lines = (count: number) => Array.from({ length: count }, (_value, index) => `line ${index}`).join('\n');

describe('foldParts', () => {
	it('leaves a short text between two changes whole', () => {
		const parts = [
			{ text: 'a', change: 'removed' as const },
			{ text: lines(8), change: 'same' as const },
			{ text: 'b', change: 'added' as const }
		];
		expect(foldParts(parts).every(({ folded }) => folded === 0)).toBe(true);
	});

	it('leaves three lines beside a change and counts those that it leaves out', () => {
		const shown = foldParts([
			{ text: lines(20), change: 'same' },
			{ text: 'x', change: 'added' },
			{ text: lines(20), change: 'same' }
		]);
		expect(shown.map(({ text, folded }) => [folded, text.split('\n').filter(Boolean).length])).toEqual([
			[17, 0],
			[0, 3],
			[0, 1],
			[0, 3],
			[17, 0]
		]);
		expect(shown[1]?.text.endsWith('line 19')).toBe(true);
		expect(shown[3]?.text.startsWith('line 0\n')).toBe(true);
	});
});
