import { fireEvent, render, screen, within } from '@testing-library/svelte';
import { tick } from 'svelte';
import { describe, expect, it } from 'vitest';
import { rowsInSight } from '../../../../src/lib/components/reading/ledger-window';
import OperatorLedger from '../../../../src/lib/components/reading/OperatorLedger.svelte';
import { makeOperator, makeOverflowingReading } from '../../../fixtures/factories/reading';

const reading = makeOverflowingReading();
const root = reading.plan?.root ?? makeOperator();
const trail = new Set(reading.trails.flatMap(({ steps }) => steps.map(({ operator }) => operator)));

function renderLedger() {
	return render(OperatorLedger, { root, trail, symptoms: reading.symptoms });
}

/** Rows of operators, without the head. */
function operatorRows(): HTMLElement[] {
	return screen.getAllByRole('row').filter((row) => row.dataset.row !== undefined);
}

/** The words of an element with single blanks between them. */
function textOf(element: HTMLElement): string {
	return (element.textContent ?? '').replace(/\s+/g, ' ');
}

/** The row of an operator by its place in the plan as printed. */
function rowAt(index: number): HTMLElement {
	const row = operatorRows()[index];
	if (row === undefined) throw new Error(`There is no row ${index}.`);
	return row;
}

describe('OperatorLedger', () => {
	it('prints one operator a row, top-down as the engine does, with its depth', () => {
		renderLedger();
		expect(operatorRows().map((row) => row.getAttribute('aria-level'))).toEqual([
			'1',
			'2',
			'3',
			'4',
			'4',
			'5'
		]);
		expect(textOf(rowAt(2))).toContain('hash join on invoice_no');
	});

	it('leaves a cell empty where the evidence holds no figure', () => {
		renderLedger();
		const cells = within(rowAt(0)).getAllByRole('gridcell');
		expect(cells.at(-1)?.textContent).toBe('');
		expect(textOf(rowAt(0))).not.toMatch(/\b0\b/);
	});

	it('says expected against actual as text', () => {
		renderLedger();
		expect(within(rowAt(5)).queryByRole('img', { name: '600 expected, 450,300 came, × 751' })).not.toBeNull();
	});

	it('tells rows on the trail without colour', () => {
		renderLedger();
		expect(operatorRows().filter((row) => row.textContent?.includes('on the trail'))).toHaveLength(3);
	});

	it('moves by arrow keys, Home and End, with one row for Tab', async () => {
		renderLedger();
		rowAt(0).focus();
		await fireEvent.keyDown(rowAt(0), { key: 'ArrowDown' });
		await tick();
		expect(document.activeElement).toBe(rowAt(1));
		await fireEvent.keyDown(rowAt(1), { key: 'End' });
		await tick();
		expect(document.activeElement).toBe(rowAt(5));
		expect(operatorRows().filter((row) => row.tabIndex === 0)).toHaveLength(1);
	});

	it("opens an operator's figures by Enter and closes them by Escape, back on the row", async () => {
		renderLedger();
		rowAt(2).focus();
		await fireEvent.keyDown(rowAt(2), { key: 'Enter' });
		const figures = screen.getByRole('group', { name: 'Figures of hash join' });
		expect(textOf(figures)).toContain('temporary files 55 MB');
		expect(textOf(figures)).toContain('ran in 8 batches instead of 1');
		await fireEvent.keyDown(figures, { key: 'Escape' });
		await tick();
		expect(screen.queryByRole('group')).toBeNull();
		expect(document.activeElement).toBe(rowAt(2));
	});

	it('draws only the rows in sight of a plan of 5,000 operators', () => {
		const children = Array.from({ length: 4999 }, (_, i) => makeOperator({ path: `0.${i}` }));
		render(OperatorLedger, { root: makeOperator({ kind: 'append', children }) });
		expect(operatorRows().length).toBeLessThan(60);
		expect(screen.getByRole('treegrid').getAttribute('aria-rowcount')).toBe('5001');
	});
});

describe('rowsInSight', () => {
	it('stays inside the table at both ends', () => {
		expect(rowsInSight(5000, 0, 640).first).toBe(0);
		expect(rowsInSight(5000, 5000 * 36, 640).end).toBe(5000);
		expect(rowsInSight(10, 0, 640)).toEqual({ first: 0, end: 10 });
	});
});
