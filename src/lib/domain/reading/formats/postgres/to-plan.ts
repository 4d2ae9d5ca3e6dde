import { walkOperators } from '../../operator';
import type { Plan, ReadingWarning } from '../../reading';
import { bareStatement } from '../statement-above';
import { fillMemoryLimits } from './memory-limits';
import { figure, isRecord, records, words, type PlanEnvelope, type PlanNode } from './plan-node';
import { toOperators } from './postgres-operator';

/** The plan in an envelope; null where it holds none. */
export function toPlan(envelope: PlanEnvelope, warnings: ReadingWarning[]): Plan | null {
	const node = envelope['Plan'];
	if (!isRecord(node)) return null;
	const found = [...warnings];
	const root = toOperators(node, found);
	const settings = settingsOf(envelope['Settings']);
	const statement = words(envelope['Query Text']);
	fillMemoryLimits(root, settings, figure(envelope['Newest Major']));
	return {
		root,
		engine: 'postgresql',
		engineVersion: null,
		leastMajorVersion: leastMajorVersion(node),
		statementText: statement === null ? null : bareStatement(statement),
		planningMs: figure(envelope['Planning Time']),
		executionMs: figure(envelope['Execution Time']) ?? figure(envelope['Total Runtime']),
		settings: settings ?? {},
		jit: jitOf(envelope['JIT']),
		hasRuntime: hasRuntime(root),
		warnings: found
	};
}

function settingsOf(value: unknown): Record<string, string> | null {
	if (!isRecord(value)) return null;
	const settings: Record<string, string> = {};
	for (const [name, setting] of Object.entries(value)) settings[name] = words(setting) ?? '';
	return settings;
}

function jitOf(value: unknown): Plan['jit'] {
	const jit = records(value)[0];
	if (jit === undefined) return null;
	const timing = records(jit['Timing'])[0];
	return {
		functions: figure(jit['Functions']),
		totalMs: timing === undefined ? null : figure(timing['Total'])
	};
}

function hasRuntime(root: Plan['root']): boolean {
	for (const { loops } of walkOperators(root)) if (loops !== null) return true;
	return false;
}

/** What only 18 and newer print: whether a node is disabled (always, in the structured forms), and rows with two decimals. */
function leastMajorVersion(node: PlanNode): number | null {
	const rows = node['Actual Rows'];
	return node['Disabled'] !== undefined || (typeof rows === 'string' && rows.includes('.')) ? 18 : null;
}
