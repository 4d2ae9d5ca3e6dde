import { maskStatement } from '../../mask-literals';
import { maskJsonPlan } from '../../masking/mask-json-plan';
import { maskTextPlan } from '../../masking/mask-text-plan';
import { maskXmlPlan } from '../../masking/mask-xml-plan';
import { maskYamlPlan } from '../../masking/mask-yaml-plan';
import { maskAddresses, maskSecrets } from '../../secrets';
import { planBodyForm } from './plan-body';
import { isSqlRecord, readRecordLine, type RecordLine } from './record-line';

/** A record longer than this is masked in parts, so that no file can fill the memory. */
const RECORD_LENGTH = 4 * 1024 * 1024;

/** Masks a log as it comes in, a record at a time: a literal may span the lines of a statement. */
export class LogMasker {
	private rest = '';
	private record: RecordLine | null = null;
	private body = '';
	private out = '';

	/** Takes more of the log; returns whole masked lines. */
	push(text: string): string {
		const all = this.rest === '' ? text : this.rest + text;
		let from = 0;
		for (let end = all.indexOf('\n'); end >= 0; end = all.indexOf('\n', from)) {
			this.line(all.charCodeAt(end - 1) === 13 ? all.slice(from, end - 1) : all.slice(from, end));
			from = end + 1;
		}
		this.rest = all.slice(from);
		if (this.rest.length > RECORD_LENGTH) {
			this.line(this.rest);
			this.rest = '';
		}
		return this.take();
	}

	end(): string {
		const last = this.rest;
		this.rest = '';
		if (last !== '') this.line(last.endsWith('\r') ? last.slice(0, -1) : last);
		this.flush();
		const masked = this.take();
		return last === '' ? masked : masked.slice(0, -1);
	}

	private take(): string {
		const masked = this.out;
		this.out = '';
		return masked;
	}

	private line(line: string): void {
		const record = readRecordLine(line);
		if (record !== null) {
			this.flush();
			this.record = record;
			this.body = record.message;
		} else if (this.record === null) this.out += maskLogText(line) + '\n';
		else {
			this.body += '\n' + line;
			if (this.body.length > RECORD_LENGTH) {
				this.flush();
			}
		}
	}

	private flush(): void {
		const { record } = this;
		if (record === null) return;
		const colon = record.severity + ':  ';
		this.out += maskAddresses(record.prefix) + colon + maskMessage(record, this.body) + '\n';
		this.record = null;
		this.body = '';
	}
}

const TEMPORARY_FILE = /^[^"'\u00ab\u201c\u300c]*pgsql_tmp/;
const DURATION = /^\S+: [\d.,]+ ms {2}/;
const STATEMENT_HEAD =
	/^(?:(?:\S+: [\d.,]+ ms {2})?(?:statement|execute [^:]*|parse [^:]*|bind [^:]*|fetch from [^:]*|[\p{L}]+(?: [^:"']{1,80})?)): /u;
const SQL_VERB =
	/^\s*(?:select|with|insert|update|delete|merge|values|execute|prepare|table|create|alter|drop|refresh|declare|fetch|copy|call|do|explain|set|begin|commit|analyze|vacuum|reindex|cluster|truncate|grant|revoke|lock)\b/i;

function maskMessage(record: RecordLine, body: string): string {
	if (TEMPORARY_FILE.test(record.message) || record.message.includes('pgsql_tmp/')) return body;
	if (isSqlRecord(record) || SQL_VERB.test(body)) return maskSecrets(maskStatement(body));
	if (DURATION.test(body) && body.includes('\n')) {
		const plan = maskPlanBody(body);
		if (plan !== null) return plan;
	}
	const head = STATEMENT_HEAD.exec(body)?.[0];
	if (head !== undefined && SQL_VERB.test(body.slice(head.length))) {
		return maskSecrets(head + maskStatement(body.slice(head.length)));
	}
	return maskLogText(body);
}

const MASKERS = { json: maskJsonPlan, yaml: maskYamlPlan, xml: maskXmlPlan, text: maskTextPlan };

/** The plan that auto_explain put below the line: each line behind a tab. */
function maskPlanBody(body: string): string | null {
	const start = body.indexOf('\n') + 1;
	const form = planBodyForm(body.slice(start).replace(/^\t/gm, ''));
	return form === null ? null : body.slice(0, start) + MASKERS[form](body.slice(start));
}

/** What a message of the server may quote of the data: values of keys and rows, input, parameters, statements. */
export function maskLogText(text: string): string {
	if (!/['"=(]/.test(text)) return maskSecrets(text);
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
