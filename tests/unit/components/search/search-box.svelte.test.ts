import { fireEvent, render, screen } from '@testing-library/svelte';
import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest';
import SearchBox from '$lib/components/search/SearchBox.svelte';
import type { SearchHit } from '$lib/domain/search/search-hit';

const HITS: SearchHit[] = [
	{
		kind: 'incident',
		id: '412',
		title: 'Invoice preview slow',
		url: '/incidents/412',
		snippet: [{ text: 'preview', mark: true }],
		score: 1
	},
	{
		kind: 'runbook',
		id: 'refresh-statistics',
		title: 'Refresh statistics',
		url: '/runbooks/refresh-statistics',
		snippet: [],
		score: 0.5
	}
];

const asked = vi.fn<(url: string, init?: RequestInit) => Promise<Response>>();

beforeEach(() => {
	vi.useFakeTimers();
	asked.mockImplementation(async () => Response.json({ items: HITS }));
	vi.stubGlobal('fetch', asked);
	// jsdom draws nothing, so it has nothing to scroll.
	Element.prototype.scrollIntoView = () => undefined;
});
afterEach(() => {
	vi.useRealTimers();
	vi.unstubAllGlobals();
	asked.mockReset();
	localStorage.clear();
});

async function type(words: string): Promise<HTMLElement> {
	const box = screen.getByRole('combobox');
	box.focus();
	await fireEvent.input(box, { target: { value: words } });
	return box;
}

/** Lets the fingers rest and the answer come. */
const rest = () => vi.advanceTimersByTimeAsync(500);

describe('SearchBox', () => {
	it('asks once when the fingers rest, not for every key', async () => {
		render(SearchBox);
		await type('inv');
		await type('invoice');
		await rest();
		expect(asked).toHaveBeenCalledTimes(1);
		expect(asked.mock.calls[0]?.[0]).toContain('q=invoice');
	});

	it('stops a question that a newer one replaces', async () => {
		asked.mockImplementationOnce(() => new Promise(() => undefined));
		render(SearchBox);
		await type('inv');
		await rest();
		await type('invoice');
		await rest();
		expect(asked.mock.calls[0]?.[1]?.signal?.aborted).toBe(true);
		expect(screen.getAllByRole('option')).toHaveLength(3);
	});

	it('shows what was found and the way to everything, and says how many', async () => {
		render(SearchBox);
		const box = await type('invoice');
		await rest();
		expect(box.getAttribute('aria-expanded')).toBe('true');
		expect(screen.getByRole('status').textContent).toContain('2 found');
		expect(screen.getAllByRole('option').map((option) => option.getAttribute('href'))).toEqual([
			'/incidents/412',
			'/runbooks/refresh-statistics',
			'/search?q=invoice'
		]);
	});

	it('moves through the options and back to the words by the arrows', async () => {
		render(SearchBox);
		const box = await type('invoice');
		await rest();
		const places: (string | null)[] = [];
		for (const key of ['ArrowDown', 'ArrowDown', 'ArrowDown', 'ArrowDown', 'ArrowUp']) {
			await fireEvent.keyDown(box, { key });
			places.push(box.getAttribute('aria-activedescendant')?.slice(-2) ?? null);
		}
		expect(places).toEqual(['-0', '-1', '-2', null, '-2']);
	});

	it('closes at Escape and keeps the words until the second one', async () => {
		render(SearchBox);
		const box = await type('invoice');
		await rest();
		await fireEvent.keyDown(box, { key: 'Escape' });
		expect(box.getAttribute('aria-expanded')).toBe('false');
		expect(box).toHaveProperty('value', 'invoice');
		await fireEvent.keyDown(box, { key: 'Escape' });
		expect(box).toHaveProperty('value', '');
	});

	it('says what to do when the search does not answer', async () => {
		asked.mockRejectedValue(new TypeError('network is down'));
		render(SearchBox);
		await type('invoice');
		await rest();
		expect(screen.getByRole('status').textContent).toContain('did not answer');
	});

	it('takes the focus by / and by Ctrl+K', async () => {
		render(SearchBox);
		for (const init of [{ key: '/' }, { key: 'k', ctrlKey: true }]) {
			screen.getByRole('combobox').blur();
			await fireEvent.keyDown(document.body, init);
			expect(document.activeElement).toBe(screen.getByRole('combobox'));
		}
	});

	it('leaves the keys alone while somebody writes, and / when it is turned off', async () => {
		render(SearchBox);
		const elsewhere = document.body.appendChild(document.createElement('textarea'));
		elsewhere.focus();
		await fireEvent.keyDown(elsewhere, { key: '/' });
		await fireEvent.keyDown(elsewhere, { key: 'k', ctrlKey: true });
		expect(document.activeElement).toBe(elsewhere);
		localStorage.setItem('catchwater.slash', 'off');
		await fireEvent.keyDown(document.body, { key: '/' });
		expect(document.activeElement).toBe(elsewhere);
		elsewhere.remove();
	});
});
