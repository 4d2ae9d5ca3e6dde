import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest';
import { EvidenceReader } from '$lib/state/evidence-reader.svelte';
import type { ReadingAnswer, ReadingAsk } from '../../../src/workers/reading-messages';
import { makeReading } from '../../fixtures/factories/reading';

/** A worker that keeps what it is asked and answers when the test says so. */
class QuietWorker extends EventTarget {
	static made: QuietWorker[] = [];
	asks: ReadingAsk[] = [];
	ended = false;
	constructor() {
		super();
		QuietWorker.made.push(this);
	}
	postMessage(ask: ReadingAsk): void {
		this.asks.push(ask);
	}
	terminate(): void {
		this.ended = true;
	}
	answer(data: ReadingAnswer): void {
		this.dispatchEvent(new MessageEvent('message', { data }));
	}
}

beforeEach(() => vi.stubGlobal('Worker', QuietWorker));
afterEach(() => {
	vi.unstubAllGlobals();
	QuietWorker.made = [];
});

function onlyWorker(): QuietWorker {
	const [worker] = QuietWorker.made;
	if (worker === undefined) throw new Error('No worker was started.');
	return worker;
}

describe('EvidenceReader', () => {
	it('says how far it has come, and what it read', () => {
		const reader = new EvidenceReader();
		const piece = reader.add('plan.txt', 'Sört');
		// In UTF-8 the umlaut takes two bytes.
		expect(piece.bytes).toBe(5);
		expect(reader.busy).toBe(true);
		onlyWorker().answer({ id: piece.id, kind: 'progress', bytesDone: 2 });
		expect(piece.bytesDone).toBe(2);
		onlyWorker().answer({ id: piece.id, kind: 'read', readings: [makeReading()], hints: null });
		expect(piece.state).toBe('read');
		expect(reader.busy).toBe(false);
		expect(reader.readings).toHaveLength(1);
	});

	it('asks one worker for everything', () => {
		const reader = new EvidenceReader();
		reader.warm();
		reader.add('a.txt', 'a');
		reader.add('b.txt', 'b');
		expect(QuietWorker.made).toHaveLength(1);
		expect(onlyWorker().asks.map((ask) => ask.name)).toEqual(['a.txt', 'b.txt']);
	});

	it('stops a piece that is being read, and has a new worker take up the others', () => {
		const reader = new EvidenceReader();
		const long = reader.add('long.log', 'a');
		const other = reader.add('plan.txt', 'b');
		reader.remove(long);
		expect(onlyWorker().ended).toBe(true);
		expect(QuietWorker.made[1]?.asks.map((ask) => ask.id)).toEqual([other.id]);
		expect(reader.pieces).toEqual([other]);
	});

	it('leaves the worker alone when a piece goes that was read', () => {
		const reader = new EvidenceReader();
		const piece = reader.add('plan.txt', 'a');
		onlyWorker().answer({ id: piece.id, kind: 'read', readings: [], hints: null });
		reader.remove(piece);
		expect(onlyWorker().ended).toBe(false);
	});

	it('does not mind an answer about a piece that was taken away', () => {
		const reader = new EvidenceReader();
		const piece = reader.add('plan.txt', 'a');
		const worker = onlyWorker();
		reader.remove(piece);
		worker.answer({ id: piece.id, kind: 'read', readings: [makeReading()], hints: null });
		expect(reader.readings).toEqual([]);
	});

	it('says of every waiting piece that it failed when the worker could not start', () => {
		const reader = new EvidenceReader();
		const piece = reader.add('plan.txt', 'a');
		onlyWorker().dispatchEvent(new Event('error'));
		expect(piece.state).toBe('failed');
	});
});
