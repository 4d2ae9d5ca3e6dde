import { describe, expect, it } from 'vitest';
import { nextReview, REVIEW_ACTIONS, stateAfter } from '$lib/domain/runbook/review';
import { RUNBOOK_STATES } from '$lib/domain/runbook/runbook';

describe('stateAfter', () => {
	it('refuses every move that is not in the table', () => {
		const moves = RUNBOOK_STATES.flatMap((state) =>
			REVIEW_ACTIONS.flatMap((action) => {
				const after = stateAfter(state, action);
				return after === null ? [] : [`${state} ${action} ${after}`];
			})
		);
		expect(moves).toEqual([
			'draft submit in-review',
			'in-review return draft',
			'in-review publish published',
			'published retire retired',
			'published reopen draft',
			'retired reopen draft'
		]);
	});
});

describe('nextReview', () => {
	it('counts days across a change of clocks in UTC', () => {
		expect(nextReview('2026-03-20T10:00:00.000Z', 30)).toBe('2026-04-19T10:00:00.000Z');
	});
});
