import type { Operator } from '../reading/operator';
import { walkOperators } from '../reading/operator';
import { phraseOperator } from '../reading/operator-phrase';
import type { Engine, LogHints, Reading, Symptom } from '../reading/reading';
import { formatBytes, formatRows, formatTimes } from '../sizing/units';

/** A value for a field of the form, and where it was read. */
export interface Suggestion {
	value: string;
	/** "plan.txt", "application_name in server.log" */
	from: string;
}

/** What evidence says for the fields of a new incident; null: it says nothing of that field. */
export interface Prefill {
	title: Suggestion | null;
	service: Suggestion | null;
	engine: (Suggestion & { value: Engine }) | null;
	engineVersion: Suggestion | null;
	database: Suggestion | null;
}

/** Longer titles are cut where they are shown. */
const LONGEST_TITLE = 160;

/** Fills the form from readings in the order in which the evidence was given; hints are those of its logs, joined. */
export function prefillFrom(readings: readonly Reading[], hints: LogHints | null): Prefill {
	const telling = findTelling(readings);
	const title = suggestTitle(readings);
	const known = readings.find((reading) => reading.engine !== 'unknown');
	const versioned = readings.find(
		(reading) => reading.engine === known?.engine && reading.engineVersion !== null
	);
	const log = readings.find((reading) => reading.spills !== null)?.name ?? 'the log';
	return {
		title: title === null || telling === null ? null : { value: title, from: telling.name },
		service: toHint(hints?.applications[0], `application name in ${log}`),
		engine: known === undefined ? null : { value: known.engine, from: known.name },
		engineVersion: toHint(versioned?.engineVersion ?? undefined, versioned?.name ?? ''),
		database: toHint(hints?.databases[0], log)
	};
}

function toHint(value: string | undefined, from: string): Suggestion | null {
	return value === undefined || value === '' ? null : { value, from };
}

/** The reading that says most: one with a trail, then one with symptoms, then a log with temporary files. */
function findTelling(readings: readonly Reading[]): Reading | null {
	return (
		readings.find((reading) => reading.trails.length > 0) ??
		readings.find((reading) => reading.plan !== null && sayable(reading) !== undefined) ??
		readings.find((reading) => (reading.spills?.files ?? 0) > 0) ??
		readings.find((reading) => sayable(reading) !== undefined) ??
		null
	);
}

/** The heaviest symptom that is a fault; a plan without figures is none. */
function sayable(reading: Reading): Symptom | undefined {
	return reading.symptoms.find((symptom) => symptom.id !== 'no-runtime-figures');
}

/**
 * One line that says what is wrong, from the reading that says most: "Hash join on invoice_no overflows (scan of
 * invoice_line: 751 times the rows expected)". null: the evidence shows nothing wrong.
 */
export function suggestTitle(readings: readonly Reading[]): string | null {
	const reading = findTelling(readings);
	if (reading === null) return null;
	const title = fromTrail(reading) ?? fromSymptom(reading) ?? fromSpills(reading);
	if (title === null) return null;
	const capital = title.charAt(0).toUpperCase() + title.slice(1);
	return capital.length <= LONGEST_TITLE ? capital : `${capital.slice(0, LONGEST_TITLE - 1).trimEnd()}…`;
}

function findOperator(reading: Reading, path: string | null | undefined): Operator | null {
	if (reading.plan === null || path === null || path === undefined) return null;
	for (const operator of walkOperators(reading.plan.root)) if (operator.path === path) return operator;
	return null;
}

function fromTrail(reading: Reading): string | null {
	const trail = reading.trails[0];
	const first = trail?.steps[0];
	if (trail === undefined || first === undefined) return null;
	const begin = findOperator(reading, first.operator);
	const end = findOperator(reading, trail.overflow);
	const off =
		first.ratio >= 1
			? `${formatTimes(first.ratio)} the rows expected`
			: `a ${formatTimes(1 / first.ratio).replace(' times', 'th')} of the rows expected`;
	const where = begin === null ? off : `${phraseOperator(begin)}: ${off}`;
	return end === null ? where : `${phraseOperator(end)} overflows (${where})`;
}

function fromSymptom(reading: Reading): string | null {
	const heaviest = reading.plan === null ? undefined : sayable(reading);
	if (heaviest === undefined) return null;
	const operator = findOperator(reading, heaviest.operator);
	const word = heaviest.id.replaceAll('-', ' ').replace(/\bjit\b/, 'JIT');
	return operator === null ? word : `${word} at ${phraseOperator(operator)}`;
}

function fromSpills(reading: Reading): string | null {
	const { spills } = reading;
	if (spills === null || spills.files === 0) return sayable(reading)?.summary ?? null;
	const files = `${formatRows(spills.files)} temporary ${spills.files === 1 ? 'file' : 'files'}, ${formatBytes(spills.bytes)}`;
	const count = spills.statements.length;
	if (count === 0) return files;
	return `${files}, by ${count === 1 ? 'one statement' : `${formatRows(count)} statements`}`;
}
