/** A statement found in the lines above a plan, and how many of those lines belong to neither. */
export interface StatementAbove {
	statement: string | null;
	/** Lines that are neither part of the statement nor a client's usual chatter. */
	unknownLines: number;
}

const EXPLAIN = /^\s*explain\b/i;
const VERB = /^\s*(?:select|with|insert|update|delete|merge|values|execute|table|create|refresh|declare)\b/i;
const PROMPT = /^[\w.@:/-]*[=\-('"*!^][*]?[>#]\s?/;
const QUERY_TEXT = /^\s*Query Text:\s?/;
const CHATTER =
	/^\s*(?:SET|RESET|BEGIN|COMMIT|ROLLBACK|PREPARE|ANALYZE|VACUUM|Timing is o|Time:\s|Pager |Output format|Query Parameters:|.*\bduration: [\d.]+ ms {1,2}plan:)/;

/** Whether a line begins what stands above another plan: a prompt, EXPLAIN, a statement. */
export function beginsStatement(line: string): boolean {
	return EXPLAIN.test(line) || VERB.test(line) || PROMPT.test(line) || QUERY_TEXT.test(line);
}

/**
 * The statement in the lines above a plan: what auto_explain prints as Query Text, else what follows EXPLAIN and its
 * options, else the last line that begins like a statement, up to the plan.
 */
export function statementAbove(lines: readonly string[]): StatementAbove {
	const bare = lines.some((line) => PROMPT.test(line))
		? lines.map((line) => line.replace(PROMPT, ''))
		: lines;
	const start = findStart(bare);
	const above = start < 0 ? bare : bare.slice(0, start);
	const unknownLines = above.filter((line) => line.trim() !== '' && !CHATTER.test(line)).length;
	if (start < 0) return { statement: null, unknownLines };
	const body = bare.slice(start).filter((line) => !/^\s*Query Parameters:/.test(line));
	return { statement: bareStatement(body.join('\n')), unknownLines };
}

function findStart(lines: readonly string[]): number {
	for (const mark of [QUERY_TEXT, EXPLAIN, VERB]) {
		const at = lines.findLastIndex((line) => mark.test(line));
		// Of lines that merely begin like a statement the first of the last run counts: "WITH … SELECT …".
		if (at >= 0) return mark === VERB ? firstOfRun(lines, at) : at;
	}
	return -1;
}

function firstOfRun(lines: readonly string[], last: number): number {
	let first = last;
	for (let i = last; i >= 0 && lines[i]?.trim() !== ''; i--) {
		if (i < last && /;\s*$/.test(lines[i] ?? '')) break;
		if (VERB.test(lines[i] ?? '')) first = i;
	}
	return first;
}

/** A statement without EXPLAIN and its options and without its closing semicolon; null where nothing is left. */
export function bareStatement(text: string): string | null {
	const sql = text
		.replace(QUERY_TEXT, '')
		.replace(
			/^\s*explain\b\s*(?:\([^()]*(?:\([^()]*\)[^()]*)*\)\s*(?=[a-z])|(?:(?:analy[sz]e|verbose)\b\s*)*)/i,
			''
		)
		.trim()
		.replace(/\s*;$/, '');
	return sql === '' ? null : sql;
}
