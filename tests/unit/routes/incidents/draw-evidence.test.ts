import { describe, expect, it } from 'vitest';
import type { Evidence } from '../../../../src/lib/domain/incident/incident';
import type { Reading } from '../../../../src/lib/domain/reading/reading';
import { drawEvidence } from '../../../../src/routes/(app)/incidents/[number]/draw-evidence';
import { makeOverflowingReading, makeReading } from '../../../fixtures/factories/reading';

function makeEvidence(id: number, readings: Reading[]): Evidence {
	return {
		id,
		sha256: 'a'.repeat(64),
		name: `piece-${id}`,
		bytes: 1,
		kind: 'plan',
		format: 'postgres-text',
		state: 'read',
		addedAt: '2026-12-01T01:31:00.000Z',
		addedBy: null,
		readings
	};
}

const spills = { events: 16, files: 16, bytes: 68_059_955, statements: [] };
const log = makeReading({ kind: 'log', name: 'server.log', spills });

describe('drawEvidence', () => {
	it('has no main reading without evidence, or where none could be read', () => {
		expect(drawEvidence([], null).main).toBeNull();
		expect(drawEvidence([makeEvidence(1, [makeReading({ kind: 'unknown' })])], null).main).toBeNull();
	});

	it('is about the reading with a trail, whatever was given first', () => {
		const drawn = drawEvidence([makeEvidence(1, [log]), makeEvidence(2, [makeOverflowingReading()])], null);
		expect(drawn.main?.key).toBe('2.0');
		expect(drawn.logs).toEqual([{ name: 'server.log', spills }]);
	});

	it('shows the reading that is asked for, and falls back where there is no such reading', () => {
		const evidence = [makeEvidence(1, [log]), makeEvidence(2, [makeOverflowingReading()])];
		expect(drawEvidence(evidence, '1.0').main?.key).toBe('1.0');
		expect(drawEvidence(evidence, '9.9').main?.key).toBe('2.0');
	});

	it('leaves evidence after a remedy out of what the incident was, and shows it when asked for', () => {
		const left = makeReading({
			symptoms: [{ id: 'cold-reads', operator: null, weight: 1, figures: {}, summary: '' }]
		});
		const evidence = [makeEvidence(1, [log]), makeEvidence(2, [makeOverflowingReading(), left])];
		const drawn = drawEvidence(evidence, null, [2]);
		expect(drawn.main?.key).toBe('1.0');
		expect(drawn.otherSymptoms).toEqual([]);
		expect(drawn.list.map(({ id }) => id)).toEqual([1, 2]);
		expect(drawEvidence(evidence, '2.0', [2]).main?.key).toBe('2.0');
	});

	it('names each symptom once, those of other pieces with where they were read', () => {
		const other = makeReading({
			name: 'other.txt',
			symptoms: [
				{ id: 'hash-spill', operator: null, weight: 0.9, figures: {}, summary: '' },
				{ id: 'cold-reads', operator: null, weight: 0.2, figures: {}, summary: '' }
			]
		});
		const drawn = drawEvidence([makeEvidence(1, [makeOverflowingReading(), other])], '1.0');
		expect(drawn.otherSymptoms.map(({ symptom, from }) => [symptom.id, from])).toEqual([
			['cold-reads', 'other.txt']
		]);
	});

	it('lists readings without their plans', () => {
		const drawn = drawEvidence([makeEvidence(1, [makeOverflowingReading()])], null);
		expect(JSON.stringify(drawn.list)).not.toContain('"children"');
	});
});
