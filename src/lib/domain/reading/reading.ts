import type { CauseId, SymptomId } from '../symptom/symptom';
import type { Operator, PlanOperator } from './operator';

export const FORMATS = [
	'postgres-json',
	'postgres-text',
	'postgres-xml',
	'postgres-yaml',
	'postgres-auto-explain',
	'postgres-log',
	'postgres-csvlog',
	'postgres-jsonlog',
	'mariadb-json',
	'mariadb-slow-log',
	'mysql-tree',
	'mysql-json',
	'showplan-xml',
	'extended-event-xml',
	'unknown'
] as const;
export type Format = (typeof FORMATS)[number];

export const ENGINES = ['postgresql', 'mariadb', 'mysql', 'showplan', 'unknown'] as const;
export type Engine = (typeof ENGINES)[number];

/** What could not be read, or was repaired, and where. */
export interface ReadingWarning {
	code: string;
	message: string;
	at: { line: number; column: number } | null;
}

export interface Statement {
	/** First 16 hex digits of the SHA-256 of the masked, case-folded, whitespace-free statement. */
	fingerprint: string;
	/** The statement with its literals masked. */
	text: string;
}

/** Temporary files of one statement, summed. */
export interface SpillingStatement {
	fingerprint: string;
	text: string;
	files: number;
	bytes: number;
	firstAt: string | null;
	lastAt: string | null;
}

/** What a log says of temporary files. */
export interface Spills {
	/** Log records that speak of a temporary file. */
	events: number;
	files: number;
	bytes: number;
	/** Largest first. */
	statements: SpillingStatement[];
}

export interface Symptom {
	id: SymptomId;
	/** Path of the operator where it shows; null: the plan or log as a whole. */
	operator: string | null;
	/** 0..1, grows with the damage done. */
	weight: number;
	figures: Record<string, number | string>;
	/** One sentence with its figures. */
	summary: string;
}

export interface Cause {
	id: CauseId;
	/** 0..1 */
	confidence: number;
	because: SymptomId[];
	/** What speaks against it on this evidence. */
	against: string[];
	/** Statements that only read, to tell it from its neighbours. */
	confirm: { sql: string; readsOnly: true }[];
	/** Slugs of published runbooks; filled in by the server, empty in the domain. */
	runbooks: string[];
}

export interface TrailStep {
	operator: string;
	expected: number;
	actual: number;
	ratio: number;
}

export interface Trail {
	sentence: string;
	/** In flow order: from where the misestimate begins up to the overflow. */
	steps: TrailStep[];
	/** Path of the operator that overflowed; null: none did. */
	overflow: string | null;
}

/** The memory that would have kept one spilling operator in memory. */
export interface OperatorSizing {
	operator: string;
	kind: 'hash' | 'sort' | 'aggregate';
	neededKb: number;
	givenKb: number | null;
	/** The smallest value of the engine's setting at which it stays in memory; kB, not multiplied. */
	setting: { name: string; valueKb: number };
	batches: number | null;
	/** The rule that it was worked out by, in words, with its source. */
	basis: string;
}

/** What the parser made of one plan or one log. Never edited. */
export interface Reading {
	name: string;
	bytes: number;
	/** Of the masked bytes. */
	sha256: string;
	kind: 'plan' | 'log' | 'unknown';
	format: Format;
	engine: Engine;
	engineVersion: string | null;
	statement: Statement | null;
	plan: {
		root: Operator;
		totalMs: number | null;
		planningMs: number | null;
		settings: Record<string, string>;
	} | null;
	spills: Spills | null;
	trails: Trail[];
	/** Heaviest first. */
	symptoms: Symptom[];
	/** Likeliest first. */
	causes: Cause[];
	sizing: OperatorSizing[];
	warnings: ReadingWarning[];
}

/** A plan as a format hands it over, before symptoms are looked for. */
export interface Plan {
	root: PlanOperator;
	engine: Engine;
	engineVersion: string | null;
	/** Major version that the plan's own wording shows at least; null: it could be any. */
	leastMajorVersion: number | null;
	/** Statement as found beside the plan, literals masked; null where the evidence holds none. */
	statementText: string | null;
	planningMs: number | null;
	executionMs: number | null;
	settings: Record<string, string>;
	jit: { functions: number | null; totalMs: number | null } | null;
	/** False: estimates only. */
	hasRuntime: boolean;
	warnings: ReadingWarning[];
}

/** What a format makes of the text: plans, a log's spills with the plans inside it, or nothing but warnings. */
export interface FormatResult {
	plans: Plan[];
	spills: Spills | null;
	/** Of the log: what its lines say of service, database and so on, for filling in the form. */
	hints: LogHints | null;
	engineVersion: string | null;
	warnings: ReadingWarning[];
}

/** Who wrote the spilling lines of a log, most frequent first. */
export interface LogHints {
	applications: string[];
	databases: string[];
	users: string[];
}
