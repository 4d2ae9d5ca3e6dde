import { cleanup, render, screen, waitFor } from '@testing-library/svelte';
import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest';
import { readEvidence } from '$lib/domain/reading/read-evidence';
import { EvidenceReader } from '$lib/state/evidence-reader.svelte';
import { PlanPair } from '$lib/state/plan-pair.svelte';
import ComparePlans from '../../../src/routes/(app)/gauge/ComparePlans.svelte';
import type { ReadingAnswer, ReadingAsk } from '../../../src/workers/reading-messages';
import { readSide } from '../../fixtures/compare';

/** A text as the bytes of a file. */
async function* bytesOf(text: string | File): AsyncIterable<Uint8Array> {
	yield new TextEncoder().encode(String(text));
}

/** A worker in this thread: it reads as the real one does. */
class ReadingHere extends EventTarget {
	postMessage({ id, name, content }: ReadingAsk): void {
		void readEvidence(bytesOf(content), name).then((readings) => {
			const data: ReadingAnswer = { id, kind: 'read', readings, hints: null };
			this.dispatchEvent(new MessageEvent('message', { data }));
		});
	}
	terminate(): void {
		// Nothing runs on that would have to be stopped.
	}
}

beforeEach(() => vi.stubGlobal('Worker', ReadingHere));
afterEach(() => {
	cleanup();
	vi.unstubAllGlobals();
});

const PAIR = 'statistics-taken-swap-the-build-side';
const before = String(readSide(PAIR, 'before'));
const after = String(readSide(PAIR, 'after'));

describe('PlanPair', () => {
	it('has nothing to compare while one side is missing', () => {
		const pair = new PlanPair(new EvidenceReader());
		pair.give('before', 'before.json', before);
		expect([pair.readings, pair.comparison]).toEqual([null, null]);
		expect(pair.on('after')).toBeNull();
	});

	it('compares once both are read, and the other way round when swapped', async () => {
		const pair = new PlanPair(new EvidenceReader());
		pair.give('before', 'before.json', before);
		pair.give('after', 'after.json', after);
		await waitFor(() => expect(pair.comparison?.summary).toMatch(/^Time fell from 666 to 388 ms/));
		pair.swap();
		expect(pair.comparison?.summary).toMatch(/^Time rose from 388 to 666 ms/);
	});

	it('begins with what was looked at, and another piece after it', () => {
		const reader = new EvidenceReader();
		const other = reader.add('after.json', after);
		const looked = reader.add('before.json', before);
		const pair = new PlanPair(reader);
		pair.begin(looked);
		expect([pair.on('before'), pair.on('after')]).toEqual([looked, other]);
	});

	it('takes the place of what was there, and forgets what was taken away elsewhere', () => {
		const reader = new EvidenceReader();
		const pair = new PlanPair(reader);
		pair.give('before', 'one.json', before);
		pair.give('before', 'two.json', before);
		expect(reader.pieces.map(({ name }) => name)).toEqual(['two.json']);
		for (const piece of reader.pieces) reader.remove(piece);
		expect(pair.on('before')).toBeNull();
	});
});

describe('ComparePlans', () => {
	it('asks for two plans under the names that the server reads', () => {
		const pair = new PlanPair(new EvidenceReader());
		render(ComparePlans, { pair, compared: null, issues: { after: 'Send one file.' }, live: false });
		expect(screen.getByRole('textbox', { name: /before/i }).getAttribute('name')).toBe('before');
		expect(screen.getByRole('textbox', { name: /after/i }).getAttribute('name')).toBe('after');
		expect(screen.getByText('Send one file.')).toBeTruthy();
	});

	it('shows the plans and, on top of the table, what changed', async () => {
		const pair = new PlanPair(new EvidenceReader());
		render(ComparePlans, { pair, compared: null, issues: {}, live: true });
		pair.give('before', 'before.json', before);
		pair.give('after', 'after.json', after);
		expect(await screen.findByText(/^The hash join still does, 27 MB instead of 55/)).toBeTruthy();
		expect(screen.getByRole('button', { name: 'Take before.json away from Before' })).toBeTruthy();
		expect(screen.getAllByText(/^hash join on invoice_no/).length).toBeGreaterThan(1);
	});
});
