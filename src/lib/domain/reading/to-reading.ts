import { interpretPlan, type Interpretation } from '../symptom/interpret-plan';
import { fingerprintStatement } from './fingerprint';
import type { Operator, PlanOperator } from './operator';
import type { Format, FormatResult, Plan, Reading, ReadingWarning, Statement } from './reading';

/** What all readings of one file have in common. */
export interface EvidenceFile {
	name: string;
	/** Of the masked bytes. */
	bytes: number;
	sha256: string;
}

/** The readings of one file: one for a log as a whole, one for each plan; always at least one. */
export function toReadings(
	file: EvidenceFile,
	format: Format,
	kind: Reading['kind'],
	result: FormatResult
): Reading[] {
	const planFormat: Format = kind === 'log' ? 'postgres-auto-explain' : format;
	const plans = result.plans.map((plan, index) =>
		planReading(file, planFormat, plan, index === 0 && kind !== 'log' ? result.warnings : [])
	);
	if (kind !== 'log' && plans.length > 0) return plans;
	const whole: Reading = {
		...emptyReading(file, format, kind),
		engineVersion: result.engineVersion,
		spills: result.spills,
		warnings: result.warnings
	};
	return [whole, ...plans];
}

/** A reading of a file in which nothing was found. */
export function emptyReading(file: EvidenceFile, format: Format, kind: Reading['kind']): Reading {
	return {
		name: file.name,
		bytes: file.bytes,
		sha256: file.sha256,
		kind,
		format,
		engine: engineOf(format),
		engineVersion: null,
		statement: null,
		plan: null,
		spills: null,
		trails: [],
		symptoms: [],
		causes: [],
		sizing: [],
		warnings: []
	};
}

function engineOf(format: Format): Reading['engine'] {
	if (format.startsWith('postgres')) return 'postgresql';
	if (format.startsWith('mariadb')) return 'mariadb';
	if (format.startsWith('mysql')) return 'mysql';
	return format === 'showplan-xml' || format === 'extended-event-xml' ? 'showplan' : 'unknown';
}

function planReading(
	file: EvidenceFile,
	format: Format,
	plan: Plan,
	fileWarnings: readonly ReadingWarning[]
): Reading {
	const { symptoms, trails, causes, sizing, warnings } = interpret(plan);
	return {
		...emptyReading(file, format, 'plan'),
		engine: plan.engine,
		engineVersion: plan.engineVersion,
		statement: toStatement(plan.statementText),
		plan: {
			root: stripFacts(plan.root),
			totalMs: plan.executionMs ?? plan.root.totalMs,
			planningMs: plan.planningMs,
			settings: plan.settings
		},
		trails,
		symptoms,
		causes,
		sizing,
		warnings: [...fileWarnings, ...plan.warnings, ...warnings]
	};
}

/** What a plan shows; a fault in a rule costs the rules and not the plan, and is said in a warning. */
function interpret(plan: Plan): Interpretation & { warnings: ReadingWarning[] } {
	try {
		return { ...interpretPlan(plan, null), warnings: [] };
	} catch (fault) {
		const what = fault instanceof Error ? fault.message : String(fault);
		const message = `Looking for symptoms failed on this plan (${what}): its operators are shown, its symptoms are not. Reread it after an update.`;
		return {
			symptoms: [],
			trails: [],
			causes: [],
			sizing: [],
			warnings: [{ code: 'rules-fault', message, at: null }]
		};
	}
}

/** A masked statement with its fingerprint; null where there is none. */
export function toStatement(maskedSql: string | null): Statement | null {
	if (maskedSql === null || maskedSql.trim() === '') return null;
	return { fingerprint: fingerprintStatement(maskedSql), text: maskedSql };
}

/** The operator without the facts that only rules read. Depth is bounded by BOUNDS.nesting. */
function stripFacts({ facts: _facts, ...operator }: PlanOperator): Operator {
	return { ...operator, children: operator.children.map(stripFacts) };
}
