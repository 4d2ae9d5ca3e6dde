import { maskAddresses } from '../../secrets';
import type { FormatResult } from '../../reading';
import { LogAccount } from './log-account';
import { takeEvent } from './log-event';
import { maskLogMessage, maskSql } from './message-mask';

/** A line without an end is held up to this length, then masked as it stands. */
const LINE_LENGTH = 8 * 1024 * 1024;

/** Cuts text that comes in pieces into whole lines. */
export class LineCutter {
	private rest = '';

	/** Whole lines, each with its line end. */
	*push(text: string): Generator<string> {
		const all = this.rest + text;
		let from = 0;
		for (let end = all.indexOf('\n'); end >= 0; end = all.indexOf('\n', from)) {
			yield all.charCodeAt(end - 1) === 13 ? `${all.slice(from, end - 1)}\n` : all.slice(from, end + 1);
			from = end + 1;
		}
		this.rest = all.slice(from);
		if (this.rest.length > LINE_LENGTH) {
			yield this.rest;
			this.rest = '';
		}
	}

	end(): string {
		const last = this.rest;
		this.rest = '';
		return last.endsWith('\r') ? last.slice(0, -1) : last;
	}
}

const FIELD =
	/"(message|detail|hint|context|statement|internal_query|remote_host)":"((?:[^"\\]|\\.)*)(?:"|$)/g;

/** Masks a jsonlog line by line; keys, order and figures stay. */
export class JsonLinesMasker {
	private readonly lines = new LineCutter();

	push(text: string): string {
		let out = '';
		for (const line of this.lines.push(text)) out += maskJsonLine(line);
		return out;
	}

	end(): string {
		return maskJsonLine(this.lines.end());
	}
}

function maskJsonLine(line: string): string {
	return line.replace(FIELD, (all: string, key: string, raw: string) => {
		const value = unquote(raw);
		const masked = maskField(key, value);
		return masked === value ? all : `"${key}":${JSON.stringify(masked)}`;
	});
}

function maskField(key: string, value: string): string {
	if (key === 'remote_host') return maskAddresses(value);
	return key === 'statement' || key === 'internal_query' ? maskSql(value) : maskLogMessage(value);
}

function unquote(raw: string): string {
	if (!raw.includes('\\')) return raw;
	try {
		const value: unknown = JSON.parse(`"${raw}"`);
		return typeof value === 'string' ? value : raw;
	} catch {
		// Cut off inside an escape: masked as it stands.
		return raw;
	}
}

/** Reads a masked jsonlog line by line. */
export class JsonLinesReader {
	private readonly account = new LogAccount();
	private damaged = 0;

	push(text: string): void {
		let from = 0;
		for (let end = text.indexOf('\n'); end >= 0; end = text.indexOf('\n', from)) {
			this.line(text.slice(from, end));
			from = end + 1;
		}
		this.line(text.slice(from));
	}

	finish(): FormatResult {
		const result = this.account.finish();
		if (this.damaged > 0) {
			const lines = this.damaged === 1 ? '1 line is' : `${this.damaged} lines are`;
			result.warnings.push({ code: 'damaged', message: `${lines} no JSON and passed over.`, at: null });
		}
		return result;
	}

	private line(line: string): void {
		if (line.trim() === '') return;
		const entry = parseLine(line);
		if (entry === null) {
			this.damaged++;
			return;
		}
		const word = (key: string) => {
			const value = entry[key];
			return typeof value === 'string' ? value : typeof value === 'number' ? String(value) : null;
		};
		takeEvent(this.account, {
			time: word('timestamp'),
			pid: word('pid'),
			user: word('user'),
			database: word('dbname'),
			application: word('application_name'),
			message: word('message') ?? '',
			statement: word('statement')
		});
	}
}

function parseLine(line: string): Record<string, unknown> | null {
	try {
		const value: unknown = JSON.parse(line);
		return typeof value === 'object' && value !== null ? { ...value } : null;
	} catch {
		// The last line of a log that is being written is often cut off; it is counted.
		return null;
	}
}
