import { z } from 'zod';
import type { Caution } from '$lib/domain/caution/caution';
import { ENGINES } from '$lib/domain/reading/reading';
import { RUNBOOK_STATES, STEP_KINDS, type Runbook, type RunbookSummary } from '$lib/domain/runbook/runbook';
import { SYMPTOM_IDS } from '$lib/domain/symptom/symptom';
import { personShape } from './incident';
import { shapeOf } from './shape';

const level = z.union([z.literal(0), z.literal(1), z.literal(2), z.literal(3)]);
const lock = z.object({ mode: z.string(), on: z.string() });

/** What one statement does to production. */
export const cautionShape = shapeOf<Caution>()(
	'Caution',
	z.object({
		sql: z.string(),
		understood: z.boolean(),
		kind: z.string(),
		locks: z.array(lock).describe('Strongest first.'),
		lock: lock.nullable(),
		blocks: z.object({ reads: z.boolean(), writes: z.boolean(), schemaChanges: z.boolean() }),
		rewrites: z.boolean(),
		inTransaction: z.boolean(),
		level: level.describe('0 reads only … 3 blocks others or cannot be undone.'),
		cancel: z.string(),
		undo: z.string(),
		load: z.string(),
		precheck: z.array(z.string()),
		basis: z.object({ source: z.string(), section: z.string() }).nullable()
	})
);

const common = z.object({
	slug: z.string(),
	title: z.string(),
	summary: z.string(),
	engines: z.array(z.enum(ENGINES)),
	symptoms: z.array(z.enum(SYMPTOM_IDS)),
	reviewEveryDays: z.number(),
	state: z.enum(RUNBOOK_STATES),
	revision: z.int().positive(),
	owner: personShape.nullable(),
	reviewer: personShape.nullable(),
	reviewDue: z.string().nullable(),
	record: z.object({
		worked: z.number(),
		partly: z.number(),
		noEffect: z.number(),
		madeWorse: z.number()
	})
});

/** A runbook in a list. */
export const runbookSummaryShape = shapeOf<RunbookSummary>()('RunbookSummary', common.extend({ level }));

/** The whole runbook. */
export const runbookShape = shapeOf<Runbook>()(
	'Runbook',
	common.extend({
		body: z.string().describe('Markdown.'),
		steps: z.array(
			z.object({
				number: z.number(),
				title: z.string(),
				kind: z.enum(STEP_KINDS),
				statements: z.array(cautionShape)
			})
		)
	})
);
