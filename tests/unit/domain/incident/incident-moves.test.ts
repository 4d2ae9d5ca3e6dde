import { describe, expect, it } from 'vitest';
import { INCIDENT_STATES, type IncidentState } from '$lib/domain/incident/incident';
import { findMoveRefusals } from '$lib/domain/incident/incident-moves';

const told = {
	cause: 'undersized-memory',
	resolution: 'work_mem raised for the job.',
	reason: 'It came back.'
};

describe('findMoveRefusals', () => {
	it('names everything that resolving lacks, not only the first', () => {
		const reasons = findMoveRefusals({
			from: 'open',
			to: 'resolved',
			cause: null,
			resolution: ' ',
			reason: null
		});
		expect(reasons).toHaveLength(2);
		expect(reasons.join()).toMatch(/cause.*resolution/s);
	});

	it('asks why an incident is open again', () => {
		const reasons = findMoveRefusals({ ...told, from: 'contained', to: 'open', reason: null });
		expect(reasons).toEqual(['Say why it is open again (reason).']);
	});

	it("says that a reviewed incident is closed, and doesn't ask for a reason that would not help", () => {
		const reasons = findMoveRefusals({ ...told, from: 'reviewed', to: 'open', reason: null });
		expect(reasons).toHaveLength(1);
		expect(reasons[0]).toContain('log a new one');
	});

	it("takes 'not found' for a cause", () => {
		expect(findMoveRefusals({ ...told, cause: 'not found', from: 'open', to: 'resolved' })).toEqual([]);
	});

	it('allows the moves of the product and no other', () => {
		const allowed = INCIDENT_STATES.flatMap((from) =>
			INCIDENT_STATES.filter((to) => to !== from && findMoveRefusals({ ...told, from, to }).length === 0).map(
				(to): [IncidentState, IncidentState] => [from, to]
			)
		);
		expect(allowed).toEqual([
			['open', 'contained'],
			['open', 'resolved'],
			['contained', 'open'],
			['contained', 'resolved'],
			['resolved', 'open'],
			['resolved', 'reviewed']
		]);
	});
});
