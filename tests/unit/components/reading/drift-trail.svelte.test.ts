import { render } from '@testing-library/svelte';
import { describe, expect, it } from 'vitest';
import DriftTrail from '../../../../src/lib/components/reading/DriftTrail.svelte';
import { drawSteps, markWords, operatorsByPath } from '../../../../src/lib/components/reading/trail-steps';
import type { Trail } from '../../../../src/lib/domain/reading/reading';
import { makeOverflowingReading } from '../../../fixtures/factories/reading';

const reading = makeOverflowingReading();
const operators = operatorsByPath(reading.plan?.root ?? null);
const trail: Trail = reading.trails[0] ?? { sentence: '', steps: [], overflow: null };

describe('drawSteps', () => {
	it('writes the row counts where the ratio changes, and that it stays where it stays', () => {
		expect(drawSteps(trail, operators).map(({ figures }) => figures)).toEqual([
			'450,300 for 600',
			'still × 751',
			'still × 751'
		]);
	});

	it('hatches what wrote to disk, and nothing before it', () => {
		expect(drawSteps(trail, operators).map(({ over }) => over)).toEqual([false, true, true]);
	});

	it('counts a hash build with the join that it feeds', () => {
		const build = [...operators.values()].find(({ kind }) => kind === 'hash-build');
		const join = [...operators.values()].find(({ kind }) => kind === 'hash-join');
		expect(build).toBeDefined();
		const split = new Map(operators);
		if (build && join) {
			const own = { ...build, batches: 8, temporaryBytes: 14 * 1024 * 1024 };
			split.set(join.path, {
				...join,
				batches: null,
				temporaryBytes: 41 * 1024 * 1024,
				children: [own]
			});
		}
		expect(drawSteps(trail, split)[1]?.overflow).toBe('8 batches, 55 MB on disk');
	});

	it('names an operator by its place where the plan does not hold it', () => {
		expect(drawSteps(trail, new Map())[0]?.name).toBe('operator 0.0.0.1.0');
	});
});

describe('markWords', () => {
	it('cuts a sentence at the words to set off, the longer one first', () => {
		expect(markWords('at hash join on a, at hash join', ['hash join', 'hash join on a'])).toEqual([
			{ text: 'at ', mark: false },
			{ text: 'hash join on a', mark: true },
			{ text: ', at ', mark: false },
			{ text: 'hash join', mark: true }
		]);
	});
});

describe('DriftTrail', () => {
	it('says every figure as text, once for each way in which it is drawn', () => {
		const { container } = render(DriftTrail, { trail, operators });
		const lists = [...container.querySelectorAll('ol')].map((list) => list.textContent ?? '');
		expect(lists).toHaveLength(2);
		for (const text of lists) {
			expect(text).toContain('scan of invoice_line');
			expect(text).toContain('450,300 for 600');
			expect(text).toContain('8 batches, 55 MB on disk');
		}
	});

	it('stands upright only, where there are more steps than a line has room for', () => {
		const steps = Array.from({ length: 6 }, (_, i) => ({
			operator: `0.${i}`,
			expected: 1,
			actual: 10,
			ratio: 10
		}));
		const { container } = render(DriftTrail, {
			trail: { sentence: '', steps, overflow: null },
			operators
		});
		expect(container.querySelectorAll('ol')).toHaveLength(1);
	});

	it('says in its caption how far off it is at worst', () => {
		const { container } = render(DriftTrail, { trail, operators });
		expect(container.querySelector('figcaption')?.textContent).toContain('× 751 at worst');
	});
});
