import { maskJsonPlan } from '../masking/mask-json-plan';
import { BOUNDS } from '../bounds';
import type { FormatResult, Plan, ReadingWarning } from '../reading';
import { nothingRead, positionAt, type TextFormat } from './format-reader';
import { parsePartialJson } from './parse-json';
import { isRecord, type PlanEnvelope } from './postgres/plan-node';
import { toPlan } from './postgres/to-plan';
import { blankDecoration } from './undecorate';

/** EXPLAIN (FORMAT JSON) of PostgreSQL: whole, pasted out of a terminal, wrapped in rows, or cut off. */
export const postgresJson: TextFormat = {
	format: 'postgres-json',
	engine: 'postgresql',
	kind: 'plan',
	recognise: (head) =>
		/"Node Type"\s*:|"Plan"\s*:\s*\{[\s+]*"Node Type/.test(head) || /\\"Node Type\\"/.test(head),
	mask: maskJsonPlan,
	read: readPostgresJson
};

/** Plans of a JSON text; what stands behind a fault is lost, what stands before it is kept. */
export function readPostgresJson(text: string): FormatResult {
	const warnings: ReadingWarning[] = [];
	const plans: Plan[] = [];
	for (const value of parseDocuments(text, warnings)) {
		for (const envelope of findEnvelopes(value)) {
			const plan = toPlan(envelope, []);
			if (plan !== null) plans.push(plan);
		}
	}
	return { ...nothingRead(warnings), plans };
}

function parseDocuments(text: string, warnings: ReadingWarning[]): unknown[] {
	try {
		return [JSON.parse(text)];
	} catch {
		// Pasted, several in a row, or damaged: read more slowly below.
	}
	const clean = blankDecoration(text);
	const values: unknown[] = [];
	const beginning = /[[{]\s*(?=["[{])/g;
	for (let match = beginning.exec(clean); match !== null; match = beginning.exec(clean)) {
		const part = parsePartialJson(clean, match.index);
		values.push(part.value);
		beginning.lastIndex = Math.max(part.end, match.index + 1);
		if (part.faultAt !== null) {
			warnings.push(cutWarning(clean, part.faultAt));
			break;
		}
	}
	return values;
}

function cutWarning(text: string, faultAt: number): ReadingWarning {
	const end = text.trimEnd().length;
	const at = positionAt(text, Math.min(faultAt, end));
	const where = `line ${at.line}, column ${at.column}`;
	if (faultAt >= end) {
		return {
			code: 'cut-off',
			message: `The plan ends too early, at ${where}; what stands before was read.`,
			at
		};
	}
	return { code: 'damaged', message: `The JSON is damaged at ${where}; what stands before was read.`, at };
}

/** Objects with a "Plan", however the client wrapped them: rows, a column of text, or a node alone. */
function findEnvelopes(value: unknown, depth = 0): PlanEnvelope[] {
	if (depth > 5) return [];
	if (typeof value === 'string') return /^\s*[[{]/.test(value) ? findInText(value, depth) : [];
	if (Array.isArray(value)) {
		const found: PlanEnvelope[] = [];
		for (const item of value.slice(0, BOUNDS.operators)) found.push(...findEnvelopes(item, depth + 1));
		return found;
	}
	if (!isRecord(value)) return [];
	if (isRecord(value['Plan'])) return [value];
	if (typeof value['Node Type'] === 'string') return [{ Plan: value }];
	return Object.values(value).flatMap((member) => findEnvelopes(member, depth + 1));
}

function findInText(text: string, depth: number): PlanEnvelope[] {
	return parseDocuments(text, []).flatMap((value) => findEnvelopes(value, depth + 1));
}
