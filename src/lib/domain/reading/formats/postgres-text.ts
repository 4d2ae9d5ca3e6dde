import { maskTextPlan } from '../masking/mask-text-plan';
import type { FormatResult, ReadingWarning } from '../reading';
import { nothingRead, type TextFormat } from './format-reader';
import { TextPlanReader } from './explain-text/text-plan-reader';

/** EXPLAIN's text form, bare, from psql, from auto_explain, or pasted through mail and chat. */
export const postgresText: TextFormat = {
	format: 'postgres-text',
	engine: 'postgresql',
	kind: 'plan',
	recognise: (head) =>
		/\((?:cost=\d+\.\d+\.\.\d+\.\d+ rows=|actual (?:time=[\d.]+ )?rows=\d|actual time=[\d.]+ rows=|never executed\))/.test(
			head
		) ||
		/^[\s>|]*->\s+(?:Parallel )?(?:Seq|Index|Bitmap|Hash|Sort|Nested|Merge|Materialize|Aggregate|CTE|Function|Result)\b/m.test(
			head
		),
	mask: maskTextPlan,
	read: readPostgresText
};

/** Every plan of a paste, one after the other. */
export function readPostgresText(text: string): FormatResult {
	const reader = new TextPlanReader(text);
	const plans = reader.read();
	const warnings: ReadingWarning[] = [...reader.warnings];
	return { ...nothingRead(warnings), plans };
}
