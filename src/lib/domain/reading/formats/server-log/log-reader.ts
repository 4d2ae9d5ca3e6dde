import type { FormatResult } from '../../reading';
import { LogAccount } from './log-account';
import { takeWords } from './log-event';
import { readPid, readPrefix } from './log-prefix';
import { NeedleFinder } from './needle-finder';
import { isStatementRecord, readRecordLine, type RecordLine } from './record-line';

const VERB =
	/^\s*(?:select|with|insert|update|delete|merge|execute|create|explain|declare|fetch|refresh|copy|call)\b/i;
/** A record this long is a plan or a statement; what comes behind is left out of it. */
const RECORD_LINES = 100_000;
/** How many lines behind a temporary file its statement is looked for; processes interleave. */
const STATEMENT_WITHIN = 400;

/** What a line holds that is worth reading. The first line of a plan ends before its body begins. */
const NEEDLES = [
	'pgsql_tmp',
	'authorized: user=',
	':\n\tQuery Text:',
	':\n\t{',
	':\n\t<explain',
	'plan:\n',
	'temp_file_limit',
	'starting PostgreSQL'
];
/** Statements that were logged for their own sake; asked for as long as spills don't bring their own. */
const LOGGED = ['statement: ', 'execute '];

/** Reads a masked log on stderr as it comes in. Lines that nothing is asked of are never looked at. */
export class LogReader {
	private readonly account = new LogAccount();
	private readonly needles = new NeedleFinder(NEEDLES);
	private readonly logged = new NeedleFinder(LOGGED);
	private record: RecordLine | null = null;
	private body: string[] = [];
	private linesToRead = 0;

	/** Takes whole lines of masked text. */
	push(text: string): void {
		const end = text.length;
		this.needles.begin(text);
		this.logged.begin(text);
		for (let from = 0; from < end;) {
			if (this.record === null && this.linesToRead === 0) {
				from = this.nextLine(text, from);
				if (from >= end) return;
			}
			const lineEnd = text.indexOf('\n', from);
			const stop = lineEnd < 0 ? end : lineEnd;
			const line = text.slice(from, stop);
			// A record that was asked for ends where the next begins; whether that is asked for is seen above.
			if (this.record !== null && this.linesToRead === 0 && readRecordLine(line) !== null) this.flush();
			else {
				this.line(line);
				from = stop + 1;
			}
		}
	}

	finish(): FormatResult {
		this.flush();
		return this.account.finish();
	}

	/** The beginning of the next line that holds something. */
	private nextLine(text: string, from: number): number {
		let at = this.needles.next(from);
		if (!this.account.statementsComeAlong) at = Math.min(at, this.logged.next(from));
		return at >= text.length ? text.length : text.lastIndexOf('\n', at - 1) + 1;
	}

	private line(line: string): void {
		if (this.linesToRead > 0) this.linesToRead--;
		const record = readRecordLine(line);
		if (record !== null) {
			this.flush();
			this.record = record;
		} else if (this.record !== null && this.body.length < RECORD_LINES) this.body.push(line);
	}

	private flush(): void {
		const { record, body } = this;
		if (record === null) return;
		this.record = null;
		if (body.length > 0) this.body = [];
		const { message } = record;
		if (message.includes('pgsql_tmp')) this.takeTemporaryFile(record);
		else if (message.includes('authorized: user=')) {
			this.account.takeConnection(readPid(record.prefix), message);
		} else if (isStatementRecord(record) || VERB.test(message)) this.takeStatement(record, body);
		else if (body.length > 0 && this.takePlan(message, body)) return;
		else this.takeOther(record, body);
	}

	private takeTemporaryFile(record: RecordLine): void {
		this.account.takeTemporaryFile(readPrefix(record.prefix), record.message);
		this.linesToRead = STATEMENT_WITHIN;
	}

	private takeStatement(record: RecordLine, body: string[]): void {
		this.account.takeStatement(readPid(record.prefix), whole(record.message, body));
		if (this.account.openSpills === 0) this.linesToRead = 0;
	}

	private takePlan(first: string, body: string[]): boolean {
		if (!/^\S+: [\d.,]+ ms /.test(first)) return false;
		return this.account.takePlan(first, untabbed(body));
	}

	private takeOther(record: RecordLine, body: string[]): void {
		if (record.message.includes('temp_file_limit')) this.account.takeFileLimit();
		else takeWords(this.account, whole(record.message, body), readPid(record.prefix));
	}
}

/** A message with its further lines, each of which the server put behind a tab. */
function whole(first: string, body: string[]): string {
	return body.length === 0 ? first : `${first}\n${untabbed(body)}`;
}

function untabbed(lines: string[]): string {
	return lines.map((line) => (line.startsWith('\t') ? line.slice(1) : line)).join('\n');
}
