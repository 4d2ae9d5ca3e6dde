import { maskTextPlan } from '../masking/mask-text-plan';
import type { FormatResult, ReadingWarning } from '../reading';
import { nothingRead, positionAt, type TextFormat } from './format-reader';
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
	read: (text) => {
		const result = readPostgresText(text);
		const cut = warnOfMissingEnd(text, result.plans.length);
		return cut === null ? result : { ...result, warnings: [...result.warnings, cut] };
	}
};

const FIGURES =
	/\((?:cost=\d+\.\d+\.\.\d+\.\d+ rows=|actual (?:time=[\d.]+ )?rows=\d|actual time=[\d.]+ rows=|never executed\))/;
const ARROW =
	/^[ \t>|\u2502]*->[ \t]+(?:Parallel )?(?:Seq|Index|Bitmap|Hash|Sort|Nested|Merge|Materialize|Aggregate|CTE|Function|Result)\b/m;

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

/** What EXPLAIN ANALYZE prints last, and psql's count of rows, in whatever language. */
const END =
	/^[ \t\r\u00a0>|\u2502+]*(?:(?:Execution time|Total runtime): |\(\d+ [^()=\n]+\)[ \t\r\u00a0]*$)/im;
const HEADER = /^[ \t\r\u00a0>|\u2502]*QUERY PLAN[ \t\r\u00a0|\u2502+\u21b5]*$/m;
/** auto_explain prints no time below its plans: it stands above them. */
const AUTO_EXPLAIN = /\bQuery Text: |\bduration: [\d.]+ ms {1,2}plan:/;

/**
 * A warning where the last plan of a paste has run-time figures or psql's header, but not what is printed below
 * such a plan: text breaks off between any two lines without a trace. Null: nothing is missing, or nobody can tell.
 */
function warnOfMissingEnd(text: string, plans: number): ReadingWarning | null {
	const lastRun = Math.max(text.lastIndexOf('(actual '), text.lastIndexOf('(never executed)'));
	const lastNode = Math.max(lastRun, text.lastIndexOf('(cost='));
	if (plans === 0 || lastNode < 0 || AUTO_EXPLAIN.test(text) || END.test(text.slice(lastNode))) return null;
	const ran = lastRun === lastNode || (lastRun >= 0 && plans === 1);
	const headed = HEADER.test(text);
	if (!ran && !headed) return null;
	const missing = ran ? 'Execution Time' : 'the count of rows';
	const message = `The plan seems to be cut off: ${missing} is missing below it (or SUMMARY was off). What is there was read.`;
	return { code: 'cut-off', message, at: positionAt(text, text.trimEnd().length) };
}
