/** What a log_line_prefix says of one line; null where it doesn't. */
export interface PrefixFacts {
	time: string | null;
	pid: string | null;
	user: string | null;
	database: string | null;
	application: string | null;
}

const TIME =
	/\d{4}-\d\d-\d\d \d\d:\d\d:\d\d(?:\.\d+)?(?: [A-Za-z]{1,5}| ?[+-]\d\d(?::?\d\d)?)?|\b\d{10}\.\d{3}\b/;
const BRACKETED = /\[(\d{1,10})(?:-\d+)?\]/;
const NAMED_PID = /\bp(?:id|rocess)?[=:]\s*(\d+)/i;
const SESSION = /\b[0-9a-f]{8}\.([0-9a-f]{1,6})\b/;
const NUMBER = /(?<![\w.:/-])(\d{2,10})(?![\w.:/-])/;
const PAIR = /\b(user|usr|u|db|database|d|app|application|application_name|a)=((?:(?!,\s*\w+=)[^,\]|;])*)/gi;
const AT = /(?:^|[\s[(])([^\s@,;[\]()=]+)@([^\s@,;[\]()=]*)/;

/**
 * Reads a prefix without knowing its log_line_prefix: time and process by their shape (bracketed, named, from the
 * session id, or the first number that stands alone), names where they are written as pairs or as user@database.
 */
export function readPrefix(prefix: string): PrefixFacts {
	const time = TIME.exec(prefix)?.[0] ?? null;
	const rest = time === null ? prefix : prefix.replace(time, ' ');
	const facts: PrefixFacts = { time, pid: pidOf(rest), user: null, database: null, application: null };
	if (rest.includes('=')) readPairs(rest, facts);
	const at = rest.includes('@') ? AT.exec(rest) : null;
	if (at !== null && at[1] !== '[unknown]') {
		facts.user ??= at[1] || null;
		facts.database ??= at[2] || null;
	}
	return facts;
}

function readPairs(rest: string, facts: PrefixFacts): void {
	for (const [, key = '', value = ''] of rest.matchAll(PAIR)) {
		const name = value.trim();
		if (name === '' || name === '[unknown]') continue;
		if (/^u/i.test(key)) facts.user = name;
		else if (/^d/i.test(key)) facts.database = name;
		else facts.application = name;
	}
}

/** The process alone, which is all that most records are asked for. */
export function readPid(prefix: string): string | null {
	const bracketed = BRACKETED.exec(prefix)?.[1];
	if (bracketed !== undefined) return bracketed;
	const time = TIME.exec(prefix)?.[0];
	return pidOf(time === undefined ? prefix : prefix.replace(time, ' '));
}

function pidOf(rest: string): string | null {
	const bracketed = BRACKETED.exec(rest)?.[1] ?? NAMED_PID.exec(rest)?.[1];
	if (bracketed !== undefined) return bracketed;
	const session = SESSION.exec(rest)?.[1];
	if (session !== undefined) return String(parseInt(session, 16));
	return NUMBER.exec(rest)?.[1] ?? null;
}
