import type { StreamFormat } from './format-reader';
import { JsonLinesMasker, JsonLinesReader } from './server-log/json-lines';

/** PostgreSQL's server log with log_destination jsonlog (15 and newer): one object a line. */
export const postgresJsonlog: StreamFormat = {
	format: 'postgres-jsonlog',
	engine: 'postgresql',
	kind: 'log',
	recognise: (head) =>
		/^\s*\{"timestamp":"\d{4}-\d\d-\d\d [^\n]*"(?:error_severity|message|pid)":/.test(head),
	openMasker: () => new JsonLinesMasker(),
	openReader: () => new JsonLinesReader()
};
