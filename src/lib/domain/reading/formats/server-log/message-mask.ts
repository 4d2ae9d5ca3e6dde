import { maskStatement } from '../../mask-literals';
import { maskJsonPlan } from '../../masking/mask-json-plan';
import { maskTextPlan } from '../../masking/mask-text-plan';
import { maskXmlPlan } from '../../masking/mask-xml-plan';
import { maskYamlPlan } from '../../masking/mask-yaml-plan';
import { maskSecrets } from '../../secrets';
import { planBodyForm } from './plan-body';

const DURATION = /^\S+: [\d.,]+ ms {2}/;
/** "duration: 1.2 ms  statement: ", "execute fetch_lines: ", and the like in other languages. */
const STATEMENT_HEAD =
	/^(?:(?:\S+: [\d.,]+ ms {2})?(?:statement|execute [^:]*|parse [^:]*|bind [^:]*|fetch from [^:]*|[\p{L}]+(?: [^:"']{1,80})?)): /u;
const SQL_VERB =
	/^\s*(?:select|with|insert|update|delete|merge|values|execute|prepare|table|create|alter|drop|refresh|declare|fetch|copy|call|do|explain|set|begin|commit|analyze|vacuum|reindex|cluster|truncate|grant|revoke|lock)\b/i;

/** The message of a log record, further lines included, with its literals masked. */
export function maskLogMessage(message: string): string {
	if (message.includes('pgsql_tmp')) return message;
	if (SQL_VERB.test(message)) return maskSql(message);
	if (DURATION.test(message) && message.includes('\n')) {
		const plan = maskPlanBody(message);
		if (plan !== null) return plan;
	}
	const head = message.includes(': ') ? STATEMENT_HEAD.exec(message)?.[0] : undefined;
	if (head !== undefined && SQL_VERB.test(message.slice(head.length))) {
		return maskSecrets(head) + maskSql(message.slice(head.length));
	}
	return maskLogText(message);
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
	if (!/['"=(]|: [A-Za-z]/.test(text)) return maskSecrets(text);
	return maskSecrets(
		text
			.replace(/'(?:[^'\n]|'')*'/g, '?')
			.replace(/\)=\(.*\)/g, ')=(?)')
			.replace(/(\bcontains )\(.*\)/g, '$1(?)')
			.replace(/(: |\bvalue |\bstring )"(?:[^"\n]|"")*"/g, '$1"?"')
			.replace(
				/(SQL statement )"([^]*)"/g,
				(_all, head: string, sql: string) => `${head}"${maskStatement(sql)}"`
			)
			.replace(/^(\s*Process \d+: )(.*)$/gm, (all, head: string, sql: string) =>
				SQL_VERB.test(sql) ? head + maskStatement(sql) : all
			)
	);
}
