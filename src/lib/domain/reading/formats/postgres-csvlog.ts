import type { StreamFormat } from './format-reader';
import { CsvMasker, CsvReader } from './server-log/csv-records';

/** PostgreSQL's server log with log_destination csvlog. */
export const postgresCsvlog: StreamFormat = {
	format: 'postgres-csvlog',
	engine: 'postgresql',
	kind: 'log',
	recognise: (head) =>
		/^\d{4}-\d\d-\d\d \d\d:\d\d:\d\d\.\d+ [^,\n]+,(?:"[^"\n]*")?,(?:"[^"\n]*")?,\d+,(?:"[^"\n]*")?,[0-9a-f]+\.[0-9a-f]+,\d+,/m.test(
			head
		),
	openMasker: () => new CsvMasker(),
	openReader: () => new CsvReader()
};
