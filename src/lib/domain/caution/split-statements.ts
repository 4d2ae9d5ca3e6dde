/** What differs between engines in where a comment or a quoted text ends. */
export interface Lexis {
	/** `#` begins a comment (MariaDB, MySQL). In PostgreSQL it is part of operators. */
	hashComments: boolean;
	/** A backslash takes the next character with it inside quotes (MariaDB, MySQL). */
	backslashEscapes: boolean;
}

const STANDARD: Lexis = { hashComments: false, backslashEscapes: false };

/**
 * Splits a script at its semicolons without a grammar: quotes, dollar quotes and comments are stepped over.
 * For engines without a parser here, and for scripts of which one statement does not parse. Pieces that hold
 * nothing but white space and comments are left out.
 */
export function splitStatements(sql: string, lexis: Lexis = STANDARD): string[] {
	const pieces: string[] = [];
	let start = 0;
	let at = 0;
	while (at < sql.length) {
		if (sql[at] === ';') {
			pieces.push(sql.slice(start, at));
			start = at + 1;
		}
		at = skipToken(sql, at, lexis);
	}
	pieces.push(sql.slice(start));
	return pieces.map((piece) => piece.trim()).filter((piece) => stripComments(piece, lexis).trim() !== '');
}

/** The statement's text without comments, white space folded: what its first keywords are read from. */
export function stripComments(sql: string, lexis: Lexis = STANDARD): string {
	let text = '';
	let at = 0;
	while (at < sql.length) {
		const next = skipToken(sql, at, lexis);
		text += isComment(sql, at, lexis) ? ' ' : sql.slice(at, next);
		at = next;
	}
	return text.replace(/\s+/g, ' ').trim();
}

function isComment(sql: string, at: number, lexis: Lexis): boolean {
	return sql.startsWith('--', at) || sql.startsWith('/*', at) || (lexis.hashComments && sql[at] === '#');
}

/** Where the token that begins at `at` ends; a plain character is a token of one. */
function skipToken(sql: string, at: number, lexis: Lexis): number {
	const rest = sql.slice(at, at + 2);
	if (rest === '--' || (lexis.hashComments && sql[at] === '#')) return endOf(sql, '\n', at + 1);
	if (rest === '/*') return endOf(sql, '*/', at + 2);
	const quote = sql[at];
	if (quote === "'" || quote === '"' || quote === '`') return skipQuoted(sql, at, lexis);
	if (quote === '$') {
		const tag = /^\$[A-Za-z_0-9]*\$/.exec(sql.slice(at, at + 66))?.[0];
		if (tag !== undefined && !/^\$\d/.test(tag)) return endOf(sql, tag, at + tag.length);
	}
	return at + 1;
}

function skipQuoted(sql: string, at: number, lexis: Lexis): number {
	const quote = sql[at];
	for (let next = at + 1; next < sql.length; next++) {
		if (lexis.backslashEscapes && sql[next] === '\\' && quote !== '`') next++;
		else if (sql[next] === quote) {
			if (sql[next + 1] !== quote) return next + 1;
			next++;
		}
	}
	return sql.length;
}

function endOf(sql: string, mark: string, from: number): number {
	const found = sql.indexOf(mark, from);
	return found < 0 ? sql.length : found + mark.length;
}
