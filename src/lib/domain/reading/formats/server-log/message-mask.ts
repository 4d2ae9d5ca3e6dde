import { maskStatement } from '../../mask-literals';
import { maskJsonPlan } from '../../masking/mask-json-plan';
import { maskTextPlan } from '../../masking/mask-text-plan';
import { maskXmlPlan } from '../../masking/mask-xml-plan';
import { maskYamlPlan } from '../../masking/mask-yaml-plan';
import { maskSecrets } from '../../secrets';
import { planBodyForm } from './plan-body';

const DURATION = /^\S+: [\d.,]+ ms {2}/;
/** `COPY booking, line 3, column note: "…"` is no statement: it quotes the data (copyfrom.c, CopyFromErrorCallback). */
const SQL_VERB =
	/\s*(?:select|with|insert|update|delete|merge|values|execute|prepare|table|create|alter|drop|refresh|declare|fetch|copy(?!\s+[^\n]{1,200}?, line \d)|call|do|explain|set|begin|commit|analyze|vacuum|reindex|cluster|truncate|grant|revoke|lock)\b/iy;

/** The message of a log record, further lines included, with its literals masked. */
export function maskLogMessage(message: string): string {
	const sqlAt = startOfSql(message);
	if (sqlAt >= 0) return maskSecrets(message.slice(0, sqlAt)) + maskSql(message.slice(sqlAt));
	if (message.includes('\n') && DURATION.test(message)) {
		const plan = maskPlanBody(message);
		if (plan !== null) return plan;
	}
	return maskLogText(message);
}

/** How far into a message a statement may begin: "duration: 1.2 ms  execute fetch_lines: SELECT". */
const HEAD_LENGTH = 160;

/** Where the first line of a message goes over to SQL, in any language; -1: nowhere. */
function startOfSql(message: string): number {
	const lineEnd = message.indexOf('\n');
	const end = Math.min(HEAD_LENGTH, lineEnd < 0 ? message.length : lineEnd);
	for (let at = 0; at < end;) {
		if (isSqlAt(message, at)) return at;
		const colon = message.indexOf(': ', at);
		if (colon < 0) return -1;
		at = colon + 2;
	}
	return -1;
}

function isSqlAt(text: string, at: number): boolean {
	SQL_VERB.lastIndex = at;
	return SQL_VERB.test(text);
}

/** A statement of a log, masked. */
export function maskSql(sql: string): string {
	return maskSecrets(maskStatement(sql));
}

const MASKERS = { json: maskJsonPlan, yaml: maskYamlPlan, xml: maskXmlPlan, text: maskTextPlan };

/** The plan that auto_explain put below the line; on stderr each line behind a tab. */
function maskPlanBody(body: string): string | null {
	const start = body.indexOf('\n') + 1;
	const form = planBodyForm(body.slice(start).replace(/^\t/gm, ''));
	return form === null ? null : body.slice(0, start) + MASKERS[form](body.slice(start));
}

/** What a message of the server may quote of the data: values of keys and rows, input, parameters, statements. */
export function maskLogText(text: string): string {
	let masked = text;
	if (masked.includes("'")) masked = masked.replace(/'(?:[^'\n]|'')*'/g, '?');
	if (masked.includes(')=(')) masked = masked.replace(/\)=\(.*\)/g, ')=(?)');
	if (masked.includes('contains (')) masked = masked.replace(/(\bcontains )\(.*\)/g, '$1(?)');
	if (masked.includes('"')) masked = maskQuoted(masked);
	if (masked.includes('Process ')) {
		masked = masked.replace(/^(\s*Process \d+: )(.*)$/gm, (all, head: string, sql: string) =>
			isSqlAt(sql, 0) ? head + maskStatement(sql) : all
		);
	}
	return maskSecrets(masked);
}

/** Double quotes hold names, but behind a colon or "value" what somebody put in, and behind "SQL statement" SQL. */
function maskQuoted(text: string): string {
	return text
		.replace(/(: |\bvalue |\bstring )"(?:[^"\n]|"")*"/g, '$1"?"')
		.replace(
			/(SQL statement )"([^]*)"/g,
			(_all, head: string, sql: string) => `${head}"${maskStatement(sql)}"`
		);
}
