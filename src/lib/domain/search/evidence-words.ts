import { walkOperators } from '../reading/operator';
import type { Reading } from '../reading/reading';

/** Statements of a log that are indexed, largest spillers first. */
const MOST_STATEMENTS = 10;
/** Characters kept of one statement, and of all words together. */
const LONGEST_STATEMENT = 4000;
const LONGEST_WORDS = 20_000;

/** The words by which an incident is found through its evidence: statements, tables, operators, symptoms, causes. */
export function evidenceWords(readings: readonly Reading[]): string {
	const words = new Set<string>();
	for (const reading of readings) {
		for (const symptom of reading.symptoms) words.add(symptom.id);
		for (const cause of reading.causes) words.add(cause.id);
		if (reading.statement !== null) words.add(reading.statement.text.slice(0, LONGEST_STATEMENT));
		if (reading.plan !== null) {
			for (const operator of walkOperators(reading.plan.root)) {
				words.add(operator.name);
				if (operator.relation !== null) words.add(operator.relation);
			}
		}
		for (const statement of reading.spills?.statements.slice(0, MOST_STATEMENTS) ?? []) {
			words.add(statement.text.slice(0, LONGEST_STATEMENT));
		}
	}
	return [...words].join('\n').slice(0, LONGEST_WORDS);
}
