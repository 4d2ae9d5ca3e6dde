/** A line that begins a record: `<prefix><SEVERITY>:  <message>`, two blanks behind the colon. */
export interface RecordLine {
	prefix: string;
	severity: string;
	message: string;
}

const ENGLISH = new Set(
	(
		'LOG ERROR FATAL PANIC WARNING NOTICE INFO DEBUG DEBUG1 DEBUG2 DEBUG3 DEBUG4 DEBUG5 ' +
		'DETAIL HINT QUERY CONTEXT STATEMENT LOCATION BACKTRACE'
	).split(' ')
);
/** What a prefix holds on a server in any language: a time, an epoch, a process in brackets, a session id. */
const PREFIX_MARK = /\d{4}-\d\d-\d\d \d\d:\d\d:\d\d|\b\d{10}\.\d{3}\b|\[\d+\]|\b[0-9a-f]{8}\.[0-9a-f]{1,6}\b/;
/** A prefix is short; what stands further right is message. */
const PREFIX_LENGTH = 400;

/**
 * Takes a line apart at its severity; null where it begins no record. Severities are translated on servers that
 * don't speak English: any word counts there, if the prefix before it looks like one.
 */
export function readRecordLine(line: string): RecordLine | null {
	if (line.charCodeAt(0) === 9) return null;
	let from = 0;
	for (let tries = 0; tries < 4; tries++) {
		const colon = line.indexOf(':  ', from);
		if (colon < 0 || colon > PREFIX_LENGTH) return null;
		// French puts a blank before the colon.
		const end = line.charCodeAt(colon - 1) === 32 || line.charCodeAt(colon - 1) === 0xa0 ? colon - 1 : colon;
		const start = wordStart(line, end);
		const word = line.slice(start, end);
		const prefix = line.slice(0, start);
		if (ENGLISH.has(word) || (word !== '' && isForeign(word) && PREFIX_MARK.test(prefix))) {
			return { prefix, severity: word, message: line.slice(colon + 3) };
		}
		from = colon + 3;
	}
	return null;
}

function wordStart(line: string, end: number): number {
	let at = end;
	while (at > 0 && isWordCode(line.charCodeAt(at - 1))) at--;
	return at;
}

function isWordCode(code: number): boolean {
	return (
		(code >= 65 && code <= 90) || (code >= 97 && code <= 122) || (code >= 48 && code <= 57) || code > 0xbf
	);
}

/** Severities are written in capitals where the script has them. */
function isForeign(word: string): boolean {
	return /^\p{L}{1,14}\d?$/u.test(word) && word === word.toUpperCase();
}

/** The statement that belongs to the record before, in the languages that the server speaks. */
const STATEMENT_WORDS = new Set(
	'STATEMENT ANWEISUNG INSTRUCTION SENTENCIA ISTRUZIONE COMANDO ОПЕРАТОР ИНСТРУКЦІЯ ステートメント 文 语句 陳述式 명령 WYRAŻENIE SATS İFADE DEYİM PŘÍKAZ'.split(
		' '
	)
);
const QUERY_WORDS = new Set('QUERY ANFRAGE REQUÊTE CONSULTA ЗАПРОС クエリ 查询 問い合わせ'.split(' '));

/** Whether a record's message is the statement that the record before it belongs to. */
export function isStatementRecord(record: RecordLine): boolean {
	return STATEMENT_WORDS.has(record.severity);
}

/** Whether a record's message is SQL as a whole. */
export function isSqlRecord(record: RecordLine): boolean {
	return STATEMENT_WORDS.has(record.severity) || QUERY_WORDS.has(record.severity);
}
