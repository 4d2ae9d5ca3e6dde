import type { FormatResult, LogHints, Plan, ReadingWarning } from '../../reading';
import { nothingRead } from '../format-reader';
import { readLogTime } from './log-time';
import { readPlanBody } from './plan-body';
import { SpillLedger, type OpenSpill } from './spill-ledger';
import { Tally } from './tally';

/** Plans read out of one log; more would not be looked at by anybody. */
const PLANS = 500;
/** Server processes remembered at a time; the oldest goes first. */
const PROCESSES = 5_000;
/** The last number of "temporary file: path "…/pgsql_tmp12784.0", size 6594560", in any language. */
const TEMPORARY_FILE = /pgsql_tmp\d+\.[^\n]*?[^\d.\w](\d+)\s*$/;
const AUTHORIZED = /\buser=(\S+)(?: database=(\S+))?(?: application_name=(.*?))?(?: SSL|\s*$)/;
const VERSION = /\bPostgreSQL (\d+(?:\.\d+)?)\b/;

/** Whose line it is; null where the line doesn't say. */
export interface LogWho {
	time: string | null;
	pid: string | null;
	user: string | null;
	database: string | null;
	application: string | null;
}

interface Process {
	/** The line of its connection, not taken apart yet. */
	authorized: string | null;
	user: string | null;
	database: string | null;
	application: string | null;
	statement: string | null;
	open: OpenSpill | null;
}

/** Adds up what the records of a log say, in whatever form they came: spills by statement, plans, who wrote them. */
export class LogAccount {
	private readonly ledger = new SpillLedger();
	private readonly processes = new Map<string, Process>();
	private readonly plans: Plan[] = [];
	private readonly applications = new Tally();
	private readonly databases = new Tally();
	private readonly users = new Tally();
	private version: string | null = null;
	private guessedZone: string | null = null;
	private plansLeftOut = 0;
	private filesWithoutStatement = 0;
	/** Processes with temporary files that no statement has been found for yet. */
	openSpills = 0;
	/** Whether a temporary file has come with a statement of its own: then all do. */
	statementsComeAlong = false;

	/** A message that speaks of a temporary file; one that only names its path (a full disk) counts as an event. */
	takeTemporaryFile(who: LogWho, message: string): void {
		const match = TEMPORARY_FILE.exec(message);
		if (match === null) {
			this.ledger.countEvent();
			return;
		}
		const bytes = Number(match[1]);
		const process = this.processOf(who.pid ?? '');
		this.ledger.countFile(bytes);
		const at = this.timeOf(who.time);
		if (process.open === null) {
			process.open = { files: 0, bytes: 0, firstAt: at, lastAt: at };
			this.openSpills++;
		}
		process.open.files++;
		process.open.bytes += bytes;
		process.open.lastAt = at ?? process.open.lastAt;
		nameConnection(process);
		this.applications.count(process.application ?? who.application);
		this.databases.count(process.database ?? who.database);
		this.users.count(process.user ?? who.user);
	}

	/** A statement that ran into temp_file_limit. */
	takeFileLimit(): void {
		this.ledger.countEvent();
	}

	/** The statement of the record before it of the same process. */
	takeStatement(pid: string | null, sql: string): void {
		const process = this.processes.get(pid ?? '');
		if (process === undefined) return;
		process.statement = sql;
		if (process.open === null) return;
		this.ledger.charge(sql, process.open);
		process.open = null;
		this.openSpills--;
		this.statementsComeAlong = true;
	}

	/** A statement that log_statement (before it runs) or log_min_duration_statement (after it) logged. */
	takeLogged(pid: string | null, sql: string, ended: boolean): void {
		const process = this.processOf(pid ?? '');
		if (!ended) this.closeSpill(process);
		process.statement = sql;
		if (ended) this.closeSpill(process);
	}

	/** "connection authorized: user=… database=… application_name=…"; taken apart when the process spills. */
	takeConnection(pid: string | null, message: string): void {
		const process = this.processOf(pid ?? '');
		process.authorized = message;
	}

	/** A plan that auto_explain logged; `first` is its line with the duration. False: there is none. */
	takePlan(first: string, body: string): boolean {
		const result = this.plans.length < PLANS ? readPlanBody(first, body) : [];
		if (result === null) return false;
		if (this.plans.length >= PLANS) this.plansLeftOut++;
		this.plans.push(...result);
		return true;
	}

	takeVersion(message: string): void {
		if (message.startsWith('starting PostgreSQL')) this.version ??= VERSION.exec(message)?.[1] ?? null;
	}

	finish(): FormatResult {
		for (const process of this.processes.values()) this.closeSpill(process);
		const hints: LogHints = {
			applications: this.applications.ranked(),
			databases: this.databases.ranked(),
			users: this.users.ranked()
		};
		const plans = this.plans.map((plan) => ({ ...plan, engineVersion: plan.engineVersion ?? this.version }));
		const spills = this.ledger.total();
		return { ...nothingRead(this.warnings()), plans, spills, hints, engineVersion: this.version };
	}

	private warnings(): ReadingWarning[] {
		const warnings: ReadingWarning[] = [];
		const warn = (code: string, message: string) => warnings.push({ code, message, at: null });
		if (this.guessedZone !== null) {
			const zone =
				this.guessedZone === ''
					? 'carry no zone'
					: `are marked ${this.guessedZone}, which has several meanings`;
			warn('ambiguous-time-zone', `The log's times ${zone}; they were taken as UTC.`);
		}
		if (this.plansLeftOut > 0) {
			warn('too-many-plans', `The log holds more than ${PLANS} plans; ${this.plansLeftOut} were left out.`);
		}
		if (this.filesWithoutStatement > 0) {
			const files =
				this.filesWithoutStatement === 1
					? '1 temporary file comes'
					: `${this.filesWithoutStatement} temporary files come`;
			warn(
				'spill-without-statement',
				`${files} without a statement: the log doesn't say which one wrote it.`
			);
		}
		return warnings;
	}

	private timeOf(text: string | null): string | null {
		const time = text === null ? null : readLogTime(text);
		if (time === null) return null;
		this.guessedZone ??= time.guessedZone;
		return time.at;
	}

	private closeSpill(process: Process): void {
		if (process.open === null) return;
		if (process.statement === null) this.filesWithoutStatement += process.open.files;
		else this.ledger.charge(process.statement, process.open);
		process.open = null;
		this.openSpills--;
	}

	private processOf(pid: string): Process {
		const known = this.processes.get(pid);
		if (known !== undefined) return known;
		const process = {
			authorized: null,
			user: null,
			database: null,
			application: null,
			statement: null,
			open: null
		};
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

function nameConnection(process: Process): void {
	const match = process.authorized === null ? null : AUTHORIZED.exec(process.authorized);
	if (match === null) return;
	process.authorized = null;
	process.user = match[1] ?? process.user;
	process.database = match[2] ?? process.database;
	process.application = match[3]?.trim() || process.application;
}
