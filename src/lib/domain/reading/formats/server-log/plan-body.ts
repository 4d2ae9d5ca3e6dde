import type { Plan } from '../../reading';
import { readPostgresJson } from '../postgres-json';
import { readPostgresText } from '../postgres-text';
import { readPostgresXml } from '../postgres-xml';
import { readPostgresYaml } from '../postgres-yaml';

/** The form in which auto_explain printed a plan (auto_explain.log_format); null: it is no plan. */
export function planBodyForm(body: string): 'json' | 'yaml' | 'xml' | 'text' | null {
	if (/^\s*\{/.test(body)) return 'json';
	if (/^\s*<explain\b/.test(body)) return 'xml';
	if (/^\s*Query Text: "/.test(body) && /^[ \t]*Plan: ?$/m.test(body)) return 'yaml';
	return /^\s*Query Text:/.test(body) || /\((?:cost=\d|actual (?:time|rows)=)/.test(body) ? 'text' : null;
}

const READERS = {
	json: readPostgresJson,
	yaml: readPostgresYaml,
	xml: readPostgresXml,
	text: readPostgresText
};

/** Plans in the body of a record "duration: 112.612 ms  plan:", tabs taken off; null: the body is no plan. */
export function readPlanBody(first: string, body: string): Plan[] | null {
	const form = planBodyForm(body);
	if (form === null) return null;
	const { plans, warnings } = READERS[form](body);
	const durationMs = Number(/ ?([\d.]+) ms /.exec(first)?.[1]);
	return plans.map((plan) => ({
		...plan,
		executionMs: plan.executionMs ?? (Number.isFinite(durationMs) ? durationMs : null),
		warnings: [...plan.warnings, ...warnings]
	}));
}
