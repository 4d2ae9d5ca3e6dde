import { z } from 'zod';
import { ENGINES } from '../reading/reading';

export const sizingInput = z.object({
	kind: z.enum(['hash', 'sort', 'aggregate']),
	/** Rows of the hashed or sorted input, or groups of an aggregate. */
	rows: z.number().positive().max(1e13),
	/** Average width of a row, bytes. */
	width: z.number().min(0).max(1e7),
	/** The setting as it stands (PostgreSQL: work_mem), kB. */
	memoryKb: z.number().positive().max(1e12),
	hashMemMultiplier: z.number().min(1).max(1000).optional(),
	engine: z.enum(ENGINES).optional(),
	engineVersion: z.string().max(60).optional(),
	sessions: z.number().int().positive().max(1e6).optional(),
	nodes: z.number().int().positive().max(1e4).optional(),
	workers: z.number().int().min(0).max(1024).optional(),
	machineMemoryKb: z.number().positive().max(1e13).optional()
});
export type SizingInput = z.infer<typeof sizingInput>;

export interface SizingRow {
	settingKb: number;
	batches: number | null;
	passes: number | null;
	temporaryBytes: number;
	/** Worst case if every session had this setting at once, kB. */
	exposureKb: number;
}

export interface Sizing {
	/** Of the structure itself, kB. */
	neededKb: number;
	/** What to set, not multiplied. */
	setting: { name: string; valueKb: number };
	batches: number | null;
	passes: number | null;
	temporaryBytes: number;
	exposureKb: number;
	/** At 1/4, 1/2, 1, 2 and 4 times the present setting. */
	table: SizingRow[];
	formula: string;
	source: string;
}
