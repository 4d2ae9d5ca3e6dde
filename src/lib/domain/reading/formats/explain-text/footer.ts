import type { PlanEnvelope, PlanNode } from '../postgres/plan-node';

/**
 * Takes a line that stands below the tree. Returns the section that its further lines belong to: "jit" or "other";
 * null: not such a line.
 */
export function takeFooter(text: string, envelope: PlanEnvelope): 'jit' | 'other' | null {
	const time = /^(Planning time|Execution time|Total runtime): ([\d.]+) ms/i.exec(text);
	if (time !== null) {
		envelope[TIMES[(time[1] ?? '').toLowerCase()] ?? ''] = time[2];
		return 'other';
	}
	if (text.startsWith('Settings: ')) {
		envelope['Settings'] = readSettings(text);
		return 'other';
	}
	if (text === 'JIT:') {
		envelope['JIT'] ??= {};
		return 'jit';
	}
	return OTHER.test(text) ? 'other' : null;
}

const TIMES: Record<string, string> = {
	'planning time': 'Planning Time',
	'execution time': 'Execution Time',
	'total runtime': 'Execution Time'
};
const OTHER =
	/^(?:Planning:|JIT for worker \d+:|Trigger .*: time=|Trigger .*: calls=|Query Identifier: |Serialization: )/;

/** "Settings: jit = 'off', work_mem = '3MB'" */
function readSettings(text: string): Record<string, string> {
	const settings: Record<string, string> = {};
	for (const [, name, value] of text.matchAll(/([\w.]+) = '((?:[^']|'')*)'/g)) {
		if (name !== undefined && value !== undefined) settings[name] = value.replaceAll("''", "'");
	}
	return settings;
}

/** A line of the JIT section: "Functions: 12", "Timing: Generation 1.2 ms, …, Total 5.6 ms". */
export function takeJitLine(text: string, jit: PlanNode): void {
	const functions = /^Functions: (\d+)/.exec(text);
	if (functions !== null) jit['Functions'] = functions[1];
	const total = /^Timing: .*\bTotal ([\d.]+) ms/.exec(text);
	if (total !== null) jit['Timing'] = { Total: total[1] };
}
