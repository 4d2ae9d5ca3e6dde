import { z } from 'zod';
import type { Comparison } from '$lib/domain/reading/compare-readings';
import { OPERATOR_KINDS, type Operator } from '$lib/domain/reading/operator';
import { ENGINES, FORMATS, type Cause, type Reading, type Symptom } from '$lib/domain/reading/reading';
import { CAUSE_IDS, SYMPTOM_IDS } from '$lib/domain/symptom/symptom';
import { shapeOf } from './shape';

const figure = z.number().nullable();
const text = z.string().nullable();

const operator: z.ZodType<Operator> = z.object({
	path: z.string(),
	kind: z.enum(OPERATOR_KINDS),
	name: z.string(),
	relation: text,
	alias: text,
	condition: text,
	estimatedRows: figure,
	actualRows: figure,
	loops: figure,
	width: figure,
	selfMs: figure,
	totalMs: figure,
	memoryKb: figure,
	memoryLimitKb: figure,
	batches: figure,
	plannedBatches: figure,
	temporaryBytes: figure,
	discardedRows: figure,
	ratio: figure,
	qError: figure,
	get children() {
		return z.array(operator);
	}
});

/** One operator of a plan, with those below it. */
export const operatorShape = shapeOf<Operator>()('Operator', operator);

/** One fault that a reading shows. */
export const symptomShape = shapeOf<Symptom>()(
	'Symptom',
	z.object({
		id: z.enum(SYMPTOM_IDS),
		operator: text,
		weight: z.number(),
		figures: z.record(z.string(), z.union([z.number(), z.string()])),
		summary: z.string()
	})
);

/** One likely cause of what a reading shows. */
export const causeShape = shapeOf<Cause>()(
	'Cause',
	z.object({
		id: z.enum(CAUSE_IDS),
		confidence: z.number(),
		because: z.array(z.enum(SYMPTOM_IDS)),
		against: z.array(z.string()),
		confirm: z.array(z.object({ sql: z.string(), readsOnly: z.literal(true) })),
		runbooks: z.array(z.string())
	})
);

const statement = z.object({ fingerprint: z.string(), text: z.string() });
const spillingStatement = statement.extend({
	files: z.number(),
	bytes: z.number(),
	firstAt: text,
	lastAt: text
});

/** What the parser made of one plan or one log. */
export const readingShape = shapeOf<Reading>()(
	'Reading',
	z.object({
		name: z.string(),
		bytes: z.number(),
		sha256: z.string(),
		kind: z.enum(['plan', 'log', 'unknown']),
		format: z.enum(FORMATS),
		engine: z.enum(ENGINES),
		engineVersion: text,
		statement: statement.nullable(),
		plan: z
			.object({
				root: operatorShape,
				totalMs: figure,
				planningMs: figure,
				settings: z.record(z.string(), z.string())
			})
			.nullable(),
		spills: z
			.object({
				events: z.number(),
				files: z.number(),
				bytes: z.number(),
				statements: z.array(spillingStatement)
			})
			.nullable(),
		trails: z.array(
			z.object({
				sentence: z.string(),
				steps: z.array(
					z.object({
						operator: z.string(),
						expected: z.number(),
						actual: z.number(),
						ratio: z.number()
					})
				),
				overflow: text
			})
		),
		symptoms: z.array(symptomShape),
		causes: z.array(causeShape),
		sizing: z.array(
			z.object({
				operator: z.string(),
				kind: z.enum(['hash', 'sort', 'aggregate']),
				neededKb: z.number(),
				givenKb: figure,
				setting: z.object({ name: z.string(), valueKb: z.number() }),
				batches: figure,
				basis: z.string()
			})
		),
		warnings: z.array(
			z.object({
				code: z.string(),
				message: z.string(),
				at: z.object({ line: z.number(), column: z.number() }).nullable()
			})
		)
	})
);

const figures = z.tuple([figure, figure]).describe('Before and after.');

/** Two readings held beside each other. */
export const comparisonShape = shapeOf<Comparison>()(
	'Comparison',
	z.object({
		summary: z.string(),
		timeMs: figures,
		temporaryBytes: figures,
		symptomsGone: z.array(z.enum(SYMPTOM_IDS)),
		symptomsNew: z.array(z.enum(SYMPTOM_IDS)),
		operators: z.array(
			z.object({
				before: text.describe('Path in the plan before; null: it is new.'),
				after: text.describe('Path in the plan after; null: it is gone.'),
				changes: z.array(z.string()).describe('Empty: nothing beyond the noise of two runs.')
			})
		)
	})
);
