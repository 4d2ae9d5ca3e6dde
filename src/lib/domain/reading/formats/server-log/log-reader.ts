import type { FormatResult, LogHints, Plan } from '../../reading';
import { nothingRead } from '../format-reader';
import { readPostgresJson } from '../postgres-json';
import { readPostgresText } from '../postgres-text';
import { readPrefix, type PrefixFacts } from './log-prefix';
import { readLogTime } from './log-time';
import { isStatementRecord, readRecordLine, type RecordLine } from './record-line';
import { SpillLedger, type OpenSpill } from './spill-ledger';
import { Tally } from './tally';

/** Plans read out of one log; more would not be looked at by anybody. */
const PLANS = 500;
const PROCESSES = 5_000;
/** The last number of "temporary file: path "base/pgsql_tmp/pgsql_tmp12784.0", size 6594560", in any language. */
const TEMPORARY_FILE = /pgsql_tmp\/?(?:pgsql_tmp)?(\d+)\.[^\n]*?[^\d.\w](\d+)\s*$/;
const FILE_LIMIT = /temp_file_limit/;
const AUTHORIZED = /\buser=(\S+)(?: database=(\S+))?(?: application_name=(.*?))?(?: SSL|\s*$)/;
const SQL_AFTER = /^(?:\S+: [\d.,]+ ms {2})?(?:statement|execute [^:]*): ([^]*)$/;
const VERB =
	/^\s*(?:select|with|insert|update|delete|merge|execute|create|explain|declare|fetch|refresh|copy|call)\b/i;
const VERSION = /\bPostgreSQL (\d+(?:\.\d+)?)\b/;

/** What is known of one server process. */
interface Process {
	user: string | null;
	database: string | null;
	application: string | null;
	statement: string | null;
	open: OpenSpill | null;
}

/** Reads a masked log as it comes in: temporary files by statement, plans of auto_explain, who wrote them. */
export class LogReader {
	private readonly ledger = new SpillLedger();
	private readonly processes = new Map<string, Process>();
	private readonly plans: Plan[] = [];
	private readonly applications = new Tally();
	private readonly databases = new Tally();
	private readonly users = new Tally();
	private version: string | null = null;
	private guessedZone: string | null = null;
	private plansLeftOut = 0;
	private spillsWithoutStatement = 0;
	private record: RecordLine | null = null;
	private body: string[] = [];

	/** Takes whole lines of masked text. */
	push(text: string): void {
		let from = 0;
		for (let end = text.indexOf('\n'); end >= 0; end = text.indexOf('\n', from)) {
			this.line(text.slice(from, end));
			from = end + 1;
		}
		if (from < text.length) this.line(text.slice(from));
	}

	finish(): FormatResult {
		this.flush();
		for (const process of this.processes.values()) this.closeSpill(process);
		const hints: LogHints = {
			applications: this.applications.ranked(),
			databases: this.databases.ranked(),
			users: this.users.ranked()
		};
		const result = nothingRead([]);
		this.warn(result);
		return { ...result, plans: this.plans, spills: this.ledger.total(), hints, engineVersion: this.version };
	}

	private warn({ warnings }: FormatResult): void {
		if (this.guessedZone !== null) {
			const message = `The log's times are marked "${this.guessedZone}", which means more than one offset; they were taken as UTC.`;
			warnings.push({ code: 'ambiguous-time-zone', message, at: null });
		}
		if (this.plansLeftOut > 0) {
			const message = `The log holds more than ${PLANS} plans; ${this.plansLeftOut} were left out.`;
			warnings.push({ code: 'too-many-plans', message, at: null });
		}
		if (this.spillsWithoutStatement > 0) {
			const message = `${this.spillsWithoutStatement} temporary files come without a statement (log_min_error_statement).`;
			warnings.push({ code: 'spill-without-statement', message, at: null });
		}
	}

	private line(line: string): void {
		const record = readRecordLine(line);
		if (record !== null) {
			this.flush();
			this.record = record;
			this.body.push(record.message);
		} else if (this.record !== null) this.body.push(line);
	}

	private flush(): void {
		const { record, body } = this;
		if (record === null) return;
		this.record = null;
		this.body = [];
		const first = record.message;
		if (first.includes('pgsql_tmp')) this.takeTemporaryFile(record, first);
		else if (isStatementRecord(record) || VERB.test(first)) this.takeStatement(record, body.join('\n'));
		else if (body.length > 1 && /^\S+: [\d.,]+ ms /.test(first)) this.takePlan(first, body);
		else if (first.includes('user=') && first.includes('database=')) this.takeConnection(record, first);
		else if (SQL_AFTER.test(first)) this.takeLogged(record, body.join('\n'));
		else if (FILE_LIMIT.test(first)) this.ledger.countEvent();
		else this.version ??= first.startsWith('starting PostgreSQL') ? (VERSION.exec(first)?.[1] ?? null) : null;
	}

	private takeTemporaryFile(record: RecordLine, message: string): void {
		const match = TEMPORARY_FILE.exec(message);
		if (match === null) return;
		const bytes = Number(match[2]);
		const facts = readPrefix(record.prefix);
		const process = this.processOf(facts.pid ?? match[1] ?? '');
		this.ledger.countFile(bytes);
		const at = this.timeOf(facts);
		process.open ??= { files: 0, bytes: 0, firstAt: at, lastAt: at };
		process.open.files++;
		process.open.bytes += bytes;
		process.open.lastAt = at ?? process.open.lastAt;
		this.applications.count(process.application ?? facts.application);
		this.databases.count(process.database ?? facts.database);
		this.users.count(process.user ?? facts.user);
	}

	private timeOf(facts: PrefixFacts): string | null {
		const time = facts.time === null ? null : readLogTime(facts.time);
		if (time === null) return null;
		this.guessedZone ??= time.guessedZone;
		return time.at;
	}

	/** A statement record belongs to the record of its own process before it, whatever stands between. */
	private takeStatement(record: RecordLine, sql: string): void {
		const process = this.processes.get(readPrefix(record.prefix).pid ?? '');
		if (process === undefined) return;
		process.statement = sql;
		if (process.open !== null) this.ledger.charge(sql, process.open);
		process.open = null;
	}

	/** log_statement and log_duration name the statement where a spill's own record doesn't. */
	private takeLogged(record: RecordLine, text: string): void {
		const sql = SQL_AFTER.exec(text)?.[1];
		if (sql === undefined) return;
		const process = this.processOf(readPrefix(record.prefix).pid ?? '');
		const before = /^\S+: [\d.,]+ ms /.test(text);
		if (!before) this.closeSpill(process);
		process.statement = sql;
		if (before) this.closeSpill(process);
	}

	private closeSpill(process: Process): void {
		if (process.open === null) return;
		if (process.statement === null) this.spillsWithoutStatement += process.open.files;
		else this.ledger.charge(process.statement, process.open);
		process.open = null;
	}

	private takeConnection(record: RecordLine, message: string): void {
		const match = AUTHORIZED.exec(message);
		if (match === null) return;
		const process = this.processOf(readPrefix(record.prefix).pid ?? '');
		process.user = match[1] ?? process.user;
		process.database = match[2] ?? process.database;
		process.application = match[3]?.trim() || process.application;
	}

	private takePlan(first: string, body: string[]): void {
		const lines = body.slice(1).map((line) => (line.startsWith('\t') ? line.slice(1) : line));
		const text = lines.join('\n');
		const isJson = /^\s*\{/.test(text);
		if (!isJson && !/^\s*Query Text:/.test(text) && !/\((?:cost=|actual )/.test(text)) return;
		if (this.plans.length >= PLANS) {
			this.plansLeftOut++;
			return;
		}
		const result = isJson ? readPostgresJson(text) : readPostgresText(text);
		const durationMs = Number(/ ?([\d.]+) ms /.exec(first)?.[1]);
		for (const plan of result.plans) {
			const executionMs = plan.executionMs ?? (Number.isFinite(durationMs) ? durationMs : null);
			this.plans.push({ ...plan, executionMs, warnings: [...plan.warnings, ...result.warnings] });
		}
	}

	private processOf(pid: string): Process {
		let process = this.processes.get(pid);
		if (process !== undefined) return process;
		process = { user: null, database: null, application: null, statement: null, open: null };
		if (this.processes.size >= PROCESSES) this.forgetOldest();
		this.processes.set(pid, process);
		return process;
	}

	private forgetOldest(): void {
		for (const [pid, process] of this.processes) {
			this.closeSpill(process);
			this.processes.delete(pid);
			return;
		}
	}
}
