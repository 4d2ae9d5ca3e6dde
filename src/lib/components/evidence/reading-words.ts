import { wordOf } from '$lib/components/reading/operator-words';
import { nameEngine } from '$lib/components/ui/engine-words';
import type { Reading } from '$lib/domain/reading/reading';
import { formatBytes, formatRows } from '$lib/domain/sizing/units';

/** Symptoms named in one line before the rest is counted. */
const NAMED = 3;

/** What a piece of evidence turned out to be: "PostgreSQL 15.18 plan", "PostgreSQL log", "not recognised". */
export function sayWhatItIs(reading: Reading): string {
	if (reading.kind === 'unknown') return 'not recognised';
	const engine = nameEngine(reading.engine, reading.engineVersion);
	const estimatesOnly = reading.symptoms.some((symptom) => symptom.id === 'no-runtime-figures');
	const kind = reading.kind === 'plan' && estimatesOnly ? 'plan, estimates only' : reading.kind;
	return engine === null ? kind : `${engine} ${kind}`;
}

/** What it shows, in one line: its symptoms, its temporary files, or why it could not be read. */
export function sayWhatItShows(reading: Reading): string {
	if (reading.kind === 'unknown') return reading.warnings[0]?.message ?? 'Nothing in it could be read.';
	const parts: string[] = [];
	const named = reading.symptoms.filter((symptom) => symptom.id !== 'no-runtime-figures');
	const ids = [...new Set(named.map((symptom) => symptom.id))];
	parts.push(...ids.slice(0, NAMED).map(wordOf));
	if (ids.length > NAMED) parts.push(`${ids.length - NAMED} more`);
	if (reading.spills !== null) {
		const { files, bytes } = reading.spills;
		parts.push(
			files === 0
				? 'no temporary files'
				: `${formatRows(files)} temporary ${files === 1 ? 'file' : 'files'}, ${formatBytes(bytes)}`
		);
	}
	return parts.length > 0 ? parts.join(', ') : 'no symptom';
}
