import { describe, expect, it } from 'vitest';
import type { Attempt } from '$lib/domain/incident/attempt';
import { changeAttempt } from '$lib/domain/incident/change-attempt';
import type { AttemptPatch } from '$lib/domain/incident/incident-input';

const NOW = '2026-03-02T03:00:00.000Z';
const CONTEXT = { personId: 7, now: NOW };

function attempt(fields: Partial<Attempt> = {}): Attempt {
	return {
		id: 1,
		runbook: 'raise-work-mem',
		runbookRevision: 2,
		title: 'Raise work_mem for one session',
		startedAt: '2026-03-02T02:00:00.000Z',
		endedAt: null,
		by: { id: 7, name: 'Ines Okafor' },
		steps: [1, 2, 3].map((number) => ({ number, tickedAt: null, by: null, skipped: null })),
		outcome: null,
		note: null,
		before: null,
		after: null,
		comparison: null,
		revision: 1,
		...fields
	};
}

function change(before: Attempt, patch: AttemptPatch) {
	const changed = changeAttempt(before, patch, CONTEXT);
	if (!changed.ok) throw new Error(changed.problem.detail);
	return changed.value;
}

function fieldsOf(before: Attempt, patch: AttemptPatch): string[] {
	const changed = changeAttempt(before, patch, CONTEXT);
	return changed.ok ? [] : (changed.problem.errors ?? []).map((issue) => issue.field);
}

describe('changeAttempt', () => {
	it('refuses a step that the runbook does not have', () => {
		expect(fieldsOf(attempt(), { steps: [{ number: 4, ticked: true }] })).toEqual(['steps[0].number']);
	});

	it('refuses steps in an attempt that follows no runbook', () => {
		const free = attempt({ runbook: null, steps: [] });
		expect(fieldsOf(free, { steps: [{ number: 1, ticked: true }] })).toEqual(['steps[0].number']);
	});

	it('refuses a step that is done and skipped at once, or named twice', () => {
		expect(fieldsOf(attempt(), { steps: [{ number: 1, ticked: true, skipped: 'no need' }] })).toEqual([
			'steps[0].skipped'
		]);
		expect(fieldsOf(attempt(), { steps: [{ number: 1, ticked: true }, { number: 1 }] })).toEqual([
			'steps[1].number'
		]);
	});

	it('refuses an end before the start', () => {
		expect(fieldsOf(attempt(), { endedAt: '2026-03-02T01:00:00.000Z' })).toEqual(['endedAt']);
	});

	it('ticks the named step now and leaves the others', () => {
		expect(change(attempt(), { steps: [{ number: 2, ticked: true }] }).steps).toEqual([
			{ number: 2, tickedAt: NOW, byId: 7, skipped: null }
		]);
	});

	it('takes a tick back, and puts a skip in its place', () => {
		expect(change(attempt(), { steps: [{ number: 2, ticked: false }] }).steps).toEqual([
			{ number: 2, tickedAt: null, byId: null, skipped: null }
		]);
		expect(change(attempt(), { steps: [{ number: 2, skipped: 'Replica is gone.' }] }).steps).toEqual([
			{ number: 2, tickedAt: null, byId: 7, skipped: 'Replica is gone.' }
		]);
	});

	it('ends with its outcome, and goes on when that is taken back', () => {
		expect(change(attempt(), { outcome: 'partly' })).toMatchObject({ outcome: 'partly', endedAt: NOW });
		const ended = attempt({ outcome: 'partly', endedAt: '2026-03-02T02:30:00.000Z' });
		expect(change(ended, { outcome: 'worked' }).endedAt).toBe('2026-03-02T02:30:00.000Z');
		expect(change(ended, { outcome: null }).endedAt).toBeNull();
	});

	it('notices that nothing is different', () => {
		expect(change(attempt(), { note: null }).isSame).toBe(true);
		expect(change(attempt(), { note: 'Lock held 3 s.' }).isSame).toBe(false);
	});
});
