import { z } from 'zod';

/** Ten years: longer is the same as for ever. */
export const RETENTION_MAX_DAYS = 3650;
/** Under a month, a review would lose its files while it is being talked about. */
export const RETENTION_MIN_DAYS = 30;

const RULE = `Give whole days from ${RETENTION_MIN_DAYS} to ${RETENTION_MAX_DAYS}, or nothing to keep files for good.`;

/** What administrators set for the whole installation. */
export interface Settings {
	/** How long the files of a reviewed incident's evidence are kept after it was resolved; null: for good. */
	evidenceDays: number | null;
	revision: number;
}

/** What is changed of the settings; what is left out stays. */
export const settingsPatch = z.object({
	evidenceDays: z
		.number({ error: RULE })
		.int(RULE)
		.min(RETENTION_MIN_DAYS, RULE)
		.max(RETENTION_MAX_DAYS, RULE)
		.nullable()
		.optional()
});
export type SettingsPatch = z.infer<typeof settingsPatch>;
