import { render, screen } from '@testing-library/svelte';
import { describe, expect, it } from 'vitest';
import ComparisonView from '$lib/components/reading/ComparisonView.svelte';
import { markSummary, sayFigure } from '$lib/components/reading/comparison-words';
import type { NamedComparison } from '$lib/domain/reading/compare-readings';

const comparison: NamedComparison = {
	summary:
		'Time fell from 646 to 404 ms. The sort no longer overflows. The hash join still does, 27 MB instead of 55.',
	timeMs: [646, 404],
	temporaryBytes: [69_500_928, null],
	symptomsGone: ['sort-spill'],
	symptomsNew: ['cold-reads'],
	changes: [{ name: 'sort by currency', before: '0.0', after: '0', changes: ['no longer overflows'] }]
};

describe('markSummary', () => {
	it('sets off the sentences that tell of harm, and no others', () => {
		expect(markSummary(comparison.summary).map(({ harm }) => harm)).toEqual([false, false, true]);
		expect(markSummary('Nothing changed: 1.2 s before and after.')).toEqual([
			{ text: 'Nothing changed: 1.2 s before and after.', harm: false }
		]);
	});
});

describe('sayFigure', () => {
	it('tells what is not known from none', () => {
		expect([null, 0, 28_278_784].map((bytes) => sayFigure(bytes, 'bytes'))).toEqual([
			'not known',
			'none',
			'27 MB'
		]);
	});
});

describe('ComparisonView', () => {
	it('reads out figures before and after, symptoms, and a table of what changed', () => {
		render(ComparisonView, { comparison });
		expect(screen.getByText('Temporary files').closest('div')?.textContent?.replace(/\s+/g, ' ')).toContain(
			'before 66.3 MB → , after not known'
		);
		expect(screen.getByText('Symptoms gone').closest('div')?.textContent).toContain('sort spill');
		expect(screen.getByText('Symptoms new').closest('div')?.textContent).toContain('cold reads');
		expect(screen.getByRole('table', { name: 'What changed, operator by operator' })).toBeTruthy();
		expect(screen.getByRole('rowheader', { name: 'sort by currency' })).toBeTruthy();
	});
});
