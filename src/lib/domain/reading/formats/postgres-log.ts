import type { StreamFormat } from './format-reader';
import { LogMasker } from './server-log/log-masker';
import { LogReader } from './server-log/log-reader';
import { readRecordLine } from './server-log/record-line';

const STAMP = /\d{4}-\d\d-\d\d \d\d:\d\d:\d\d|\b\d{10}\.\d{3}\b|\[\d+\]|\b[0-9a-f]{8}\.[0-9a-f]{1,6}\b/;

/** PostgreSQL's server log on stderr, with any log_line_prefix, in any language. */
export const postgresLog: StreamFormat = {
	format: 'postgres-log',
	engine: 'postgresql',
	kind: 'log',
	recognise,
	openMasker: () => new LogMasker(),
	openReader: () => new LogReader()
};

/** A log has records, and lines that are neither records nor their continuations are the exception. */
function recognise(head: string): boolean {
	let records = 0;
	let others = 0;
	for (const line of head.split('\n', 400)) {
		if (line.trim() === '' || /^\s/.test(line)) continue;
		const record = readRecordLine(line);
		if (record === null) others++;
		else if (STAMP.test(record.prefix) || record.message.includes('pgsql_tmp') || record.prefix === '')
			records++;
	}
	return records > 0 && records * 4 >= others;
}
