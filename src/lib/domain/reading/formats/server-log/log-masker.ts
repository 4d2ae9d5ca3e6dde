import { maskAddresses } from '../../secrets';
import { maskLogMessage, maskLogText, maskSql } from './message-mask';
import { isSqlRecord, readRecordLine, type RecordLine } from './record-line';

/** A record longer than this is masked in parts, so that no file can fill the memory. */
const RECORD_LENGTH = 4 * 1024 * 1024;

/** Masks a log as it comes in, a record at a time: a literal may span the lines of a statement. */
export class LogMasker {
	private readonly messages = new MessageMasker();
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
		this.out += maskAddresses(record.prefix) + colon + this.messages.mask(record, this.body) + '\n';
		this.record = null;
		this.body = '';
	}
}

/** Servers repeat themselves: short messages are remembered, and all forgotten when there are too many. */
const REMEMBERED = 4_000;
const REMEMBERED_LENGTH = 500;

/** Masks messages, each of those that come again and again but once. */
class MessageMasker {
	private readonly known = new Map<string, string>();

	mask(record: RecordLine, body: string): string {
		if (isSqlRecord(record)) return maskSql(body);
		// Statements differ by their literals: remembering them would only fill the memory.
		if (body.length > REMEMBERED_LENGTH || body.startsWith('duration: ') || body.startsWith('statement: ')) {
			return maskLogMessage(body);
		}
		const known = this.known.get(body);
		if (known !== undefined) return known;
		const masked = maskLogMessage(body);
		if (this.known.size >= REMEMBERED) this.known.clear();
		this.known.set(body, masked);
		return masked;
	}
}
