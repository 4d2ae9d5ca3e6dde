import { computeSizing } from '$lib/domain/sizing/compute-sizing';
import type { Sizing, SizingInput, SizingRow } from '$lib/domain/sizing/sizing';

/** A line of the panel's table: a setting and what happens at it. */
export interface PanelRow extends SizingRow {
	/** now: the setting as it stands; enough: the smallest that keeps it in memory. */
	mark: 'now' | 'enough' | null;
}

/** The table at 1/4 to 4 times the setting, with a line for the setting that is enough; smallest first. */
export function listRows(input: SizingInput, sizing: Sizing): PanelRow[] {
	const enoughKb = sizing.setting.valueKb;
	const rows: PanelRow[] = sizing.table
		.filter((row) => row.settingKb !== enoughKb)
		.map((row) => ({ ...row, mark: row.settingKb === input.memoryKb ? 'now' : null }));
	const { batches, passes, temporaryBytes, exposureKb } = computeSizing({ ...input, memoryKb: enoughKb });
	rows.push({ settingKb: enoughKb, batches, passes, temporaryBytes, exposureKb, mark: 'enough' });
	return rows.sort((a, b) => a.settingKb - b.settingKb);
}
