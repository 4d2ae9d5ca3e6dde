import { describe, expect, it } from 'vitest';
import { beginIncident, changeIncident, type IncidentFacts } from '$lib/domain/incident/change-incident';
import type { IncidentInput, IncidentPatch } from '$lib/domain/incident/incident-input';

const NOW = '2026-03-02T03:00:00.000Z';

function begin(input: Partial<IncidentInput> = {}): IncidentFacts {
	const begun = beginIncident({ title: 'Berth report is slow', ...input }, '2026-03-02T02:00:00.000Z');
	if (!begun.ok) throw new Error(begun.problem.detail);
	return begun.value;
}

function problemOf(before: IncidentFacts, patch: IncidentPatch) {
	const change = changeIncident(before, patch, NOW);
	return change.ok ? null : change.problem;
}

function change(before: IncidentFacts, patch: IncidentPatch) {
	const changed = changeIncident(before, patch, NOW);
	if (!changed.ok) throw new Error(changed.problem.detail);
	return changed.value;
}

const resolved = () => begin({ state: 'resolved', cause: 'missing-index', resolution: 'Index made.' });

describe('beginIncident', () => {
	it('refuses one that is logged as resolved without saying what ended it', () => {
		const begun = beginIncident({ title: 'Slow', state: 'resolved' }, NOW);
		expect(begun).toMatchObject({ ok: false, problem: { code: 'refused' } });
		expect(begun.ok ? [] : begun.problem.reasons).toHaveLength(2);
	});

	it('refuses times that contradict each other and names the later one', () => {
		const begun = beginIncident(
			{ title: 'Slow', startedAt: '2026-03-02T02:00:00.000Z', detectedAt: '2026-03-02T01:00:00.000Z' },
			NOW
		);
		expect(begun).toMatchObject({
			ok: false,
			problem: { code: 'invalid', errors: [{ field: 'detectedAt' }] }
		});
	});

	it('starts open, of severity 3, noticed now, where nothing but a title is given', () => {
		expect(begin()).toMatchObject({
			severity: 3,
			state: 'open',
			startedAt: null,
			detectedAt: '2026-03-02T02:00:00.000Z',
			labels: []
		});
	});

	it('invents no time beside one that was given', () => {
		expect(begin({ startedAt: '2025-01-01T00:00:00.000Z' }).detectedAt).toBeNull();
	});

	it('takes a text of blanks for none', () => {
		expect(begin({ service: '  ', cause: '' })).toMatchObject({ service: null, cause: null });
	});
});

describe('changeIncident', () => {
	it('refuses to take away what a resolved incident says of its end', () => {
		expect(problemOf(resolved(), { cause: null })).toMatchObject({ code: 'refused' });
	});

	it('names the field that was given where it contradicts one that stands', () => {
		const before = begin({ detectedAt: '2026-03-02T02:00:00.000Z' });
		expect(problemOf(before, { startedAt: '2026-03-02T02:30:00.000Z' })?.errors).toMatchObject([
			{ field: 'startedAt' }
		]);
	});

	it('leaves alone what is left out, and clears what is null', () => {
		const before = begin({ service: 'berth-planner', labels: ['night'] });
		expect(change(before, { service: null }).after).toMatchObject({ service: null, labels: ['night'] });
		expect(change(before, { labels: null }).after.labels).toEqual([]);
	});

	it('falls back to severity 3 where it is cleared, and keeps the state', () => {
		const before = begin({ severity: 1 });
		expect(change(before, { severity: null, state: null }).after).toMatchObject({
			severity: 3,
			state: 'open'
		});
	});

	it('stamps when it was contained and resolved, unless that is given', () => {
		const contained = change(begin(), { state: 'contained' });
		expect(contained.after.containedAt).toBe(NOW);
		const at = '2026-03-02T02:45:00.000Z';
		expect(change(begin(), { state: 'contained', containedAt: at }).after.containedAt).toBe(at);
	});

	it('forgets the end of an incident that came back, and keeps what was thought of it', () => {
		const { after } = change(resolved(), { state: 'open', reason: 'Spilled again at night.' });
		expect(after).toMatchObject({ resolvedAt: null, containedAt: null, cause: 'missing-index' });
	});

	it('says which fields changed, and none for what is the same', () => {
		const before = begin({ service: 'berth-planner' });
		expect(change(before, { service: 'berth-planner', title: 'Berth report is slow' }).changed).toEqual([]);
		expect(change(before, { owner: 4, severity: 2 }).changed).toEqual(['severity', 'ownerId']);
	});
});
