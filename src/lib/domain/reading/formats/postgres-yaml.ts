import { maskYamlPlan } from '../masking/mask-yaml-plan';
import type { FormatResult, Plan, ReadingWarning } from '../reading';
import { nothingRead, type TextFormat } from './format-reader';
import { parseYamlPlan } from './parse-yaml-plan';
import { isRecord } from './postgres/plan-node';
import { toPlan } from './postgres/to-plan';
import { statementAbove } from './statement-above';
import { blankDecoration } from './undecorate';

/** EXPLAIN (FORMAT YAML) of PostgreSQL, also as pasted out of psql. */
export const postgresYaml: TextFormat = {
	format: 'postgres-yaml',
	engine: 'postgresql',
	kind: 'plan',
	recognise: (head) => /^[ \t>|\u2502]*(?:- )?(?:Plan: *[+|\u2502\u21b5]*[ \t+|]*$|Node Type: ")/m.test(head),
	mask: maskYamlPlan,
	read: readPostgresYaml
};

/** Plans of a YAML text. */
export function readPostgresYaml(text: string): FormatResult {
	const { documents, others } = parseYamlPlan(blankDecoration(text).split('\n'));
	const plans: Plan[] = [];
	let unknown = 0;
	documents.forEach((document, index) => {
		const above = others.filter((other) => other.documents === index).map((other) => other.text);
		const found = statementAbove(above);
		unknown += found.unknownLines;
		const envelope = isRecord(document['Plan']) ? document : { Plan: document };
		if (found.statement !== null) envelope['Query Text'] ??= found.statement;
		const plan = toPlan(envelope, []);
		if (plan !== null) plans.push(plan);
	});
	const below = others.filter((other) => other.documents === documents.length).map((other) => other.text);
	unknown += statementAbove(below).unknownLines;
	const warnings: ReadingWarning[] = [];
	if (unknown > 0) {
		const lines = unknown === 1 ? '1 line is' : `${unknown} lines are`;
		warnings.push({
			code: 'lines-not-understood',
			message: `${lines} no part of a plan and passed over.`,
			at: null
		});
	}
	return { ...nothingRead(warnings), plans };
}
