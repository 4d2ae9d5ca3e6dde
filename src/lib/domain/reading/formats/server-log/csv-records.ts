import type { FormatResult } from '../../reading';
import { maskUnknown } from '../../masking/mask-unknown';
import { maskAddresses } from '../../secrets';
import { LineCutter } from './json-lines';
import { LogAccount } from './log-account';
import { takeEvent } from './log-event';
import { maskLogMessage, maskSql } from './message-mask';

/** Columns by position; 23 up to 12, 24 in 13, 26 from 14 on (manual, "Using CSV-Format Log Output"). */
const COLUMN = {
	time: 0,
	user: 1,
	database: 2,
	pid: 3,
	connection: 4,
	message: 13,
	detail: 14,
	hint: 15,
	internalQuery: 16,
	context: 18,
	query: 19,
	application: 22
} as const;

/** The columns of 12 and older. */
const FEWEST_FIELDS = 23;

/** A record that is still open at this length has lost a quotation mark and is given up. */
const RECORD_LENGTH = 4 * 1024 * 1024;

/** Puts lines together to records: a field in quotes may hold line breaks. */
class RecordCutter {
	private readonly lines = new LineCutter();
	private open = '';
	private quotes = 0;

	*push(text: string): Generator<string> {
		for (const line of this.lines.push(text)) {
			this.open = this.open === '' ? line : this.open + line;
			this.quotes += countQuotes(line);
			if (this.quotes % 2 === 1 && this.open.length < RECORD_LENGTH) continue;
			yield this.take();
		}
	}

	end(): string {
		this.open += this.lines.end();
		return this.take();
	}

	private take(): string {
		const record = this.open;
		this.open = '';
		this.quotes = 0;
		return record;
	}
}

function countQuotes(text: string): number {
	let count = 0;
	for (let at = text.indexOf('"'); at >= 0; at = text.indexOf('"', at + 1)) count++;
	return count;
}

const FIELD = /"((?:[^"]|"")*)(?:"|$)|[^,\n]*/y;

/** The fields of a record as they are written, quotes kept. */
function splitRecord(record: string): string[] {
	const fields: string[] = [];
	const field = new RegExp(FIELD);
	for (let at = 0; at <= record.length; at = field.lastIndex + 1) {
		field.lastIndex = at;
		const raw = field.exec(record)?.[0];
		if (raw === undefined) break;
		fields.push(raw);
		if (record[field.lastIndex] !== ',') break;
	}
	return fields;
}

function unquote(raw: string | undefined): string {
	if (raw === undefined || !raw.startsWith('"')) return raw ?? '';
	return raw.slice(1, raw.length > 1 && raw.endsWith('"') ? -1 : undefined).replaceAll('""', '"');
}

function quote(value: string): string {
	return `"${value.replaceAll('"', '""')}"`;
}

const MASKS: readonly (readonly [number, (value: string) => string])[] = [
	[COLUMN.connection, maskAddresses],
	[COLUMN.message, maskLogMessage],
	[COLUMN.detail, maskLogMessage],
	[COLUMN.hint, maskLogMessage],
	[COLUMN.internalQuery, maskSql],
	[COLUMN.context, maskLogMessage],
	[COLUMN.query, maskSql]
];

/** Masks a csvlog record by record; columns and figures stay. */
export class CsvMasker {
	private readonly records = new RecordCutter();

	push(text: string): string {
		let out = '';
		for (const record of this.records.push(text)) out += maskRecord(record);
		return out;
	}

	end(): string {
		return maskRecord(this.records.end());
	}
}

function maskRecord(record: string): string {
	if (record.trim() === '') return record;
	const fields = splitRecord(record);
	// No record: the rest of one that was cut, or something else in the file.
	if (fields.length < FEWEST_FIELDS) return maskUnknown(record);
	for (const [column, mask] of MASKS) {
		const raw = fields[column];
		if (raw === undefined || raw === '') continue;
		const value = unquote(raw);
		const masked = mask(value);
		if (masked !== value) fields[column] = quote(masked);
	}
	return fields.join(',') + (record.endsWith('\n') ? '\n' : '');
}

/** Reads a masked csvlog record by record. */
export class CsvReader {
	private readonly account = new LogAccount();
	private readonly records = new RecordCutter();

	push(text: string): void {
		for (const record of this.records.push(text)) this.record(record);
	}

	finish(): FormatResult {
		this.record(this.records.end());
		return this.account.finish();
	}

	private record(record: string): void {
		if (record.trim() === '') return;
		const fields = splitRecord(record);
		const word = (column: number) => unquote(fields[column]) || null;
		takeEvent(this.account, {
			time: word(COLUMN.time),
			pid: word(COLUMN.pid),
			user: word(COLUMN.user),
			database: word(COLUMN.database),
			application: word(COLUMN.application),
			message: word(COLUMN.message) ?? '',
			statement: word(COLUMN.query)
		});
	}
}
