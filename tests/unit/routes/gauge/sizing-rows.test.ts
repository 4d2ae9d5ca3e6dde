import { describe, expect, it } from 'vitest';
import { computeSizing } from '$lib/domain/sizing/compute-sizing';
import { listRows } from '../../../../src/routes/(app)/gauge/sizing-rows';
import { EXAMPLE } from '../../../../src/routes/(app)/gauge/start-sizing';

describe('listRows', () => {
	it('shows the setting as it stands and the one that is enough among the multiples, smallest first', () => {
		const rows = listRows(EXAMPLE, computeSizing(EXAMPLE));
		expect(rows.map((row) => row.settingKb)).toEqual(
			rows.map((row) => row.settingKb).toSorted((a, b) => a - b)
		);
		expect(rows.find((row) => row.mark === 'now')?.settingKb).toBe(4096);
		expect(rows.find((row) => row.mark === 'enough')?.temporaryBytes).toBe(0);
	});

	it('has one line for a setting that is exactly enough', () => {
		const enough = { ...EXAMPLE, memoryKb: computeSizing(EXAMPLE).setting.valueKb };
		const rows = listRows(enough, computeSizing(enough));
		expect(rows.filter((row) => row.settingKb === enough.memoryKb)).toHaveLength(1);
	});
});
