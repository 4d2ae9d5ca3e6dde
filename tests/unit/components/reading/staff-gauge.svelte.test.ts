import { render, screen } from '@testing-library/svelte';
import { describe, expect, it } from 'vitest';
import { rulerFor } from '../../../../src/lib/components/reading/scale';
import StaffGauge from '../../../../src/lib/components/reading/StaffGauge.svelte';
import { spreadLabels } from '../../../../src/lib/components/reading/staff-gauge';
import { formatKb } from '../../../../src/lib/domain/sizing/units';

const marks = [
	{ kind: 'limit' as const, value: 8192, text: '8 MB given' },
	{ kind: 'actual' as const, value: 28672, text: '28 MB needed', note: 'hash table' }
];

describe('rulerFor', () => {
	it('holds every value between its ends, and at least one decade', () => {
		const ruler = rulerFor([8192, 28672], 1024);
		expect([ruler.from / 1024, ruler.to / 1024]).toEqual([1, 100]);
		expect(rulerFor([7], 1)).toMatchObject({ from: 1, to: 10 });
		expect(rulerFor([], 1)).toMatchObject({ from: 1, to: 10 });
	});

	it('has its ticks at 1, 2 and 5 times a power of ten, evenly as logarithms go', () => {
		const ruler = rulerFor([1, 100], 1);
		expect(ruler.ticks.map(({ value }) => value)).toEqual([1, 2, 5, 10, 20, 50, 100]);
		expect(ruler.at(10)).toBeCloseTo(0.5);
	});

	it('keeps what lies beyond at its ends', () => {
		const ruler = rulerFor([1, 100], 1);
		expect([ruler.at(0), ruler.at(1e9)]).toEqual([0, 1]);
	});
});

describe('spreadLabels', () => {
	it('moves labels apart that would stand on each other, inside the ruler', () => {
		const placed = spreadLabels([{ y: 100 }, { y: 104 }, { y: 226 }], 14, 226);
		const gaps = placed.slice(1).map((label, i) => label.y - (placed[i]?.y ?? 0));
		expect(Math.min(...gaps)).toBeGreaterThanOrEqual(32);
		expect(Math.max(...placed.map(({ y }) => y))).toBeLessThanOrEqual(226);
	});

	it('leaves labels alone that have room', () => {
		expect(spreadLabels([{ y: 40 }, { y: 200 }], 14, 226)).toEqual([{ y: 40 }, { y: 200 }]);
	});
});

describe.each(['vertical', 'horizontal'] as const)('a %s StaffGauge', (orientation) => {
	it('says its marks as text', () => {
		render(StaffGauge, { label: 'Hash table', marks, format: formatKb, unit: 1024, orientation });
		expect(
			screen.queryByRole('img', { name: 'Hash table: 8 MB given; 28 MB needed (hash table)' })
		).not.toBeNull();
	});

	it('hatches only what lies above the limit', () => {
		const { container, rerender } = render(StaffGauge, {
			label: 'Hash table',
			marks,
			format: formatKb,
			unit: 1024,
			orientation
		});
		expect(container.querySelectorAll('rect[fill^="url"]')).toHaveLength(1);
		return rerender({
			marks: [...marks.slice(0, 1), { kind: 'actual' as const, value: 4096, text: '4 MB needed' }]
		}).then(() => expect(container.querySelectorAll('rect[fill^="url"]')).toHaveLength(0));
	});
});
