import { maskTextPlan } from '../masking/mask-text-plan';
import type { FormatResult, ReadingWarning } from '../reading';
import { nothingRead, type TextFormat } from './format-reader';
import { readNodeLine } from './explain-text/node-line';
import { isPlanBody, TextPlanReader } from './explain-text/text-plan-reader';
import { blankDecoration } from './undecorate';

/** EXPLAIN's text form, bare, from psql, from auto_explain, or pasted through mail and chat. */
export const postgresText: TextFormat = {
	format: 'postgres-text',
	engine: 'postgresql',
	kind: 'plan',
	recognise: (head) => !OTHER_TREE.test(head) && (FIGURES.test(head) || ARROW.test(head) || isBarePlan(head)),
	mask: maskTextPlan,
	read: readPostgresText
};

const FIGURES =
	/\((?:cost=\d+\.\d+\.\.\d+\.\d+ rows=|actual (?:time=[\d.]+ )?rows=\d|actual time=[\d.]+ rows=|never executed\))/;
const ARROW =
	/^[\s>|\u2502]*->\s+(?:Parallel )?(?:Seq|Index|Bitmap|Hash|Sort|Nested|Merge|Materialize|Aggregate|CTE|Function|Result)\b/m;

/** MySQL prints its plans with arrows and figures of the same shape; its operators are named otherwise. */
const OTHER_TREE =
	/-> (?:Table scan|Nested loop|Filter:|Sort:|Limit:|Index (?:lookup|scan|range)|Covering index|Single-row|Inner hash|Left hash|Stream results|Select #|Rows fetched)|\(cost=\d+(?:\.\d+)?(?:e\+?\d+)? rows=/;

/** COSTS OFF leaves names alone: one of an operator, and under it, if anything, what stands below an operator. */
function isBarePlan(head: string): boolean {
	const lines = blankDecoration(head)
		.split('\n')
		.map((line) => line.trim())
		.filter((line) => line !== '');
	return lines.slice(0, 100).some((line, index) => {
		if (readNodeLine(line, false) === null) return false;
		const next = lines[index + 1];
		return next === undefined ? index === 0 : isPlanBody(next);
	});
}

/** Every plan of a paste, one after the other. */
export function readPostgresText(text: string): FormatResult {
	const reader = new TextPlanReader(text);
	const plans = reader.read();
	const warnings: ReadingWarning[] = [...reader.warnings];
	return { ...nothingRead(warnings), plans };
}
