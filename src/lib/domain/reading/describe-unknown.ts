import type { ReadingWarning } from './reading';

const HELP =
	'Catchwater reads plans of EXPLAIN (ANALYZE, BUFFERS, SETTINGS) of PostgreSQL as text, JSON, YAML or XML, and its server logs.';

/** What a text in no known format looks like: a test of its beginning, and what to say of it. */
const LOOKS: readonly (readonly [RegExp, string, string])[] = [
	[/<ShowPlanXML\b/, 'showplan-xml', 'This is a plan in Showplan XML, which Catchwater does not read yet.'],
	[
		/<event\s[^>]*\bname="/,
		'extended-event-xml',
		'These are extended events in XML, which Catchwater does not read yet.'
	],
	[
		/"query_block"\s*:[^]*"r_loops"/,
		'mariadb-json',
		"This is MariaDB's ANALYZE FORMAT=JSON, which Catchwater does not read yet."
	],
	[
		/"query_block"\s*:/,
		'mysql-json',
		'This is a JSON plan of MySQL or MariaDB, which Catchwater does not read yet.'
	],
	[
		/"(?:query_plan|inputs)"\s*:[^]*"operation"\s*:/,
		'mysql-json',
		'This is a JSON plan of MySQL, which Catchwater does not read yet.'
	],
	[
		/^[ \t]*\|?[ \t]*-> .*\((?:cost=[\d.e+]+ rows=|actual time=[\d.]+\.\.[\d.]+ rows=)/m,
		'mysql-tree',
		"This is MySQL's plan as a tree, which Catchwater does not read yet."
	],
	[
		/^# (?:User@Host|Time|Query_time): /m,
		'mariadb-slow-log',
		'This is a slow query log, which Catchwater does not read yet.'
	],
	[
		/^\d{4}-\d\d-\d\d \d\d:\d\d:\d\d\.\d+ \S+,("[^"]*")?,("[^"]*")?,\d+,/m,
		'postgres-csvlog',
		"This is PostgreSQL's log as CSV, which Catchwater does not read yet; the stderr form of it works."
	],
	[
		/^\{"timestamp":"[^"]+",/m,
		'postgres-jsonlog',
		"This is PostgreSQL's log as JSON, which Catchwater does not read yet; the stderr form of it works."
	],
	[
		/^[ \t]*-? ?Plan: *$|^[ \t]*Node Type: "/m,
		'postgres-yaml',
		'This is a plan as YAML; FORMAT JSON or the text form of it works.'
	],
	[
		/postgresql\.org\/2009\/explain/,
		'postgres-xml',
		'This is a plan as XML; FORMAT JSON or the text form of it works.'
	],
	[
		/^\s*(?:explain\b[^]*?)?\b(?:select|with|insert|update|delete|merge)\b[^]*\b(?:from|into|set|values)\b/i,
		'statement-only',
		'This is a statement without its plan. Run it with EXPLAIN (ANALYZE, BUFFERS, SETTINGS) before it and send what comes back.'
	],
	[/^\s*[[{]/, 'other-json', `This is JSON, but no plan. ${HELP}`],
	[/^\s*</, 'other-xml', `This is XML or HTML, but no plan. ${HELP}`]
];

/** Says what an unreadable text looks like and what would help. */
export function describeUnknown(head: string): ReadingWarning {
	if (head.trim() === '') {
		return { code: 'empty', message: 'The file is empty: was it saved before the plan came back?', at: null };
	}
	for (const [pattern, code, message] of LOOKS) {
		if (pattern.test(head)) return { code, message, at: null };
	}
	return { code: 'unknown-format', message: `No plan and no log was found in this text. ${HELP}`, at: null };
}
