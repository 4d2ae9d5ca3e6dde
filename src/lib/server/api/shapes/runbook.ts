import { z } from 'zod';
import type { Caution } from '$lib/domain/caution/caution';
import { ENGINES } from '$lib/domain/reading/reading';
import type { RunbookComparison } from '$lib/domain/runbook/compare-revisions';
import { REVIEW_ACTIONS } from '$lib/domain/runbook/review';
import type { RevisionSummary, RunbookRevision } from '$lib/domain/runbook/revision';
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
export const runbookSummaryShape = shapeOf<RunbookSummary>()(
	'RunbookSummary',
	common.extend({
		level,
		draft: z
			.object({ revision: z.int().positive(), state: z.enum(['draft', 'in-review']) })
			.nullable()
			.describe('A newer text than the published one.')
	})
);

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

const event = z.object({
	action: z.enum(REVIEW_ACTIONS),
	by: personShape.nullable(),
	at: z.string(),
	note: z.string().nullable()
});

const revisionCommon = z.object({
	revision: z.int().positive(),
	title: z.string(),
	state: z.enum(RUNBOOK_STATES).nullable().describe('null: a later revision took its place.'),
	createdAt: z.string(),
	createdBy: personShape.nullable(),
	note: z.string().nullable().describe('What its author said of the change.'),
	events: z.array(event).describe('What was done with it, earliest first.')
});

/** A revision in the history. */
export const revisionSummaryShape = shapeOf<RevisionSummary>()('RevisionSummary', revisionCommon);

/** A revision with its text. */
export const revisionShape = shapeOf<RunbookRevision>()(
	'RunbookRevision',
	revisionCommon.extend({
		slug: z.string(),
		summary: z.string(),
		body: z.string().describe('Markdown.'),
		engines: z.array(z.enum(ENGINES)),
		symptoms: z.array(z.enum(SYMPTOM_IDS)),
		reviewEveryDays: z.number()
	})
);

const parts = z.array(z.object({ text: z.string(), change: z.enum(['same', 'added', 'removed']) }));
const weighedStatement = z.object({ sql: z.string(), level }).nullable();

/** What is different between two revisions. */
export const runbookComparisonShape = shapeOf<RunbookComparison>()(
	'RunbookComparison',
	z.object({
		slug: z.string(),
		from: z.int().positive(),
		to: z.int().positive(),
		cautions: z
			.array(
				z.object({
					step: z.number(),
					title: z.string(),
					before: weighedStatement,
					after: weighedStatement
				})
			)
			.describe(
				'Statements whose caution differs: changed levels first, then new ones, then those that are gone.'
			),
		fields: z.array(
			z.object({ field: z.enum(['title', 'summary', 'engines', 'symptoms', 'reviewEveryDays']), parts })
		),
		body: parts.describe('The text by word; all parts together hold both texts.')
	})
);
