import type { FormatResult } from '../../reading';
import { LogAccount } from './log-account';
import { takeWords } from './log-event';
import { readPrefix } from './log-prefix';
import { isStatementRecord, readRecordLine, type RecordLine } from './record-line';

const VERB =
	/^\s*(?:select|with|insert|update|delete|merge|execute|create|explain|declare|fetch|refresh|copy|call)\b/i;
/** A record this long is a plan or a statement; what comes behind is left out of it. */
const RECORD_LINES = 100_000;

/** Reads a masked log on stderr as it comes in. */
export class LogReader {
	private readonly account = new LogAccount();
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
		return this.account.finish();
	}

	private line(line: string): void {
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
		if (message.includes('pgsql_tmp')) this.account.takeTemporaryFile(readPrefix(record.prefix), message);
		else if (isStatementRecord(record) || VERB.test(message)) this.takeStatement(record, body);
		else if (body.length > 0 && this.takePlan(message, body)) return;
		else if (message.includes('user=') && message.includes('database=')) {
			this.account.takeConnection(readPrefix(record.prefix).pid, message);
		} else this.takeOther(record, body);
	}

	private takeStatement(record: RecordLine, body: string[]): void {
		this.account.takeStatement(readPrefix(record.prefix).pid, whole(record.message, body));
	}

	private takePlan(first: string, body: string[]): boolean {
		if (!/^\S+: [\d.,]+ ms /.test(first)) return false;
		return this.account.takePlan(first, untabbed(body));
	}

	private takeOther(record: RecordLine, body: string[]): void {
		if (record.message.includes('temp_file_limit')) this.account.takeFileLimit();
		else takeWords(this.account, whole(record.message, body), readPrefix(record.prefix).pid);
	}
}

/** A message with its further lines, each of which the server put behind a tab. */
function whole(first: string, body: string[]): string {
	return body.length === 0 ? first : `${first}\n${untabbed(body)}`;
}

function untabbed(lines: string[]): string {
	return lines.map((line) => (line.startsWith('\t') ? line.slice(1) : line)).join('\n');
}
