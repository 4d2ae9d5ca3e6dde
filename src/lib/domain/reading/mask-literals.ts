import { LiteralLists } from './literal-lists';

/**
 * Masks the literals of SQL: strings of every kind, numbers and dates become `?`, lists of literals collapse to one.
 * Identifiers, parameters ($1), casts and layout stay; comments go, for they may hold anything.
 * Works on whole statements and on the expressions that EXPLAIN prints. Masking twice changes nothing.
 *
 * Tokens after the PostgreSQL manual, 4.1 "Lexical Structure".
 */
export function maskStatement(sql: string): string {
	return /[\d'?]|\$\w*\$|--|\/\*/.test(sql) ? new Masker(sql).run() : sql;
}

/** After these words a minus belongs to the number behind it and is no subtraction. */
const BEFORE_VALUE = new Set(
	(
		'select where and or not between in then else when case limit offset by on returning values set like ilike is ' +
		'from having return default fetch first next distinct all any some array row rows range preceding using'
	).split(' ')
);
/** These may stand in a list of literals: date '…', NULL. */
const LITERAL_WORDS = new Set('null true false date time timestamp timestamptz interval'.split(' '));

const SPACE = /[\s\u00a0\ufeff]+/y;
const WORD = /[A-Za-z_\u0080-\uffff][\w$\u0080-\uffff]*/y;
const NUMBER =
	/0[xX][\da-fA-F_]+|0[oO][0-7_]+|0[bB][01_]+|(?:\d[\d_]*(?:\.(?!\.)[\d_]*)?|\.\d[\d_]*)(?:[eE][+-]?\d+)?/y;
const STRING_START = /(?:[eEbBxXnN]|[uU]&)?'/y;
const IDENTIFIER = /(?:[uU]&)?"(?:[^"]|"")*"|`[^`\n]*`/y;
const PARAMETER = /\$\d+/y;
const DOLLAR_TAG = /\$(?:[A-Za-z_\u0080-\uffff][A-Za-z_0-9\u0080-\uffff]*)?\$/y;
const COMMENT = /--[^\n]*|\/\*/y;

class Masker {
	private readonly lists = new LiteralLists();
	private at = 0;
	/** How far the input has been copied or dropped. */
	private done = 0;
	/** What stood before: a minus behind an operator is a sign. */
	private before: 'operator' | 'value' | 'word' = 'operator';
	private word = '';
	private afterCast = false;
	private signAt = -1;

	constructor(private readonly sql: string) {}

	run(): string {
		while (this.at < this.sql.length) {
			const code = this.sql.charCodeAt(this.at);
			if (code === 32 || code === 10 || code === 9) this.at++;
			else if (!isSpaceLike(code) || !this.skip(SPACE)) this.takeToken(code);
		}
		this.copy(this.at);
		return this.lists.text;
	}

	private takeToken(code: number): void {
		const start = this.at;
		if (isWordStart(code)) {
			if (mayBePrefix(this.sql.charCodeAt(this.at + 1)) && this.skip(STRING_START)) this.takeString(start);
			else if (mayBePrefix(this.sql.charCodeAt(this.at + 1)) && this.skip(IDENTIFIER)) this.takeValue();
			else if (this.skip(WORD)) this.takeWord(start);
			else this.takeMark();
		} else if (isDigit(code) || (code === DOT && isDigit(this.sql.charCodeAt(this.at + 1)))) {
			this.skip(NUMBER);
			this.takeLiteral(start);
		} else if (code === QUOTE) {
			this.at++;
			if (this.isContraction(start)) this.before = 'word';
			else this.takeString(start);
		} else if (code === HOLE) {
			this.at++;
			this.takeLiteral(start);
		} else if ((code === DOUBLE_QUOTE || code === BACK_QUOTE) && this.skip(IDENTIFIER)) this.takeValue();
		else if (code === DOLLAR && this.skip(PARAMETER)) this.takeValue();
		else if (code === DOLLAR && this.skip(DOLLAR_TAG)) this.takeDollarString(start);
		else if ((code === MINUS || code === SLASH) && this.skip(COMMENT)) this.dropComment(start);
		else this.takeMark();
	}

	private skip(pattern: RegExp): boolean {
		pattern.lastIndex = this.at;
		if (!pattern.test(this.sql)) return false;
		this.at = pattern.lastIndex;
		return true;
	}

	private copy(upTo: number): void {
		if (upTo > this.done) this.lists.append(this.sql.slice(this.done, upTo));
		this.done = upTo;
	}

	private takeWord(start: number): void {
		const lower = this.sql.slice(start, this.at).toLowerCase();
		if (!this.afterCast) {
			if (LITERAL_WORDS.has(lower)) this.lists.countLiteral();
			else this.lists.spoil(lower);
		}
		this.before = BEFORE_VALUE.has(lower) ? 'operator' : 'word';
		this.word = lower;
		this.signAt = -1;
		// "(InitPlan 2).col1": this number names a part of the plan.
		if (lower === 'initplan' || lower === 'subplan') this.skip(/ \d+/y);
	}

	private takeString(start: number): void {
		const first = this.sql.charCodeAt(start) | 32;
		this.at = endOfString(this.sql, this.at, first === LOWER_E);
		this.takeLiteral(start);
	}

	private takeDollarString(start: number): void {
		const close = this.sql.indexOf(this.sql.slice(start, this.at), this.at);
		this.at = close < 0 ? this.sql.length : close + (this.at - start);
		this.takeLiteral(start);
	}

	private takeLiteral(start: number): void {
		this.copy(this.signAt >= 0 ? this.signAt : start);
		this.lists.append('?');
		this.done = this.at;
		this.lists.countLiteral();
		this.settle('value');
	}

	/** "don't", "here's": an apostrophe of the prose around a statement, which begins no string. */
	private isContraction(quoteAt: number): boolean {
		if (this.before !== 'word' || !/[a-z]/i.test(this.sql.charAt(quoteAt - 1))) return false;
		return /^(?:s|t|re|ve|ll|d|m)(?=[\s,.;:!?)]|$)/i.test(this.sql.slice(quoteAt + 1, quoteAt + 4));
	}

	private takeValue(): void {
		this.lists.spoil();
		this.settle('value');
	}

	private settle(before: 'operator' | 'value'): void {
		this.before = before;
		this.word = '';
		this.afterCast = false;
		this.signAt = -1;
	}

	private dropComment(start: number): void {
		this.copy(start);
		if (this.sql.charCodeAt(start) === SLASH) {
			this.at = endOfComment(this.sql, this.at);
			this.lists.append(' ');
		}
		this.done = this.at;
	}

	private takeMark(): void {
		const mark = this.sql.charAt(this.at);
		const start = this.at;
		this.at++;
		if (mark === '(' || mark === '[') {
			this.copy(this.at);
			this.lists.open(this.before !== 'operator', this.word);
			this.settle('operator');
		} else if (mark === ')' || mark === ']') {
			const cast = this.afterCast;
			this.copy(start);
			this.lists.close(mark);
			this.done = this.at;
			this.settle('value');
			this.afterCast = cast;
		} else if (mark === ',') {
			this.copy(start);
			this.lists.comma();
			this.done = this.at;
			this.settle('operator');
		} else if (mark === '.') {
			this.before = 'word';
		} else if (mark === ':' && this.sql.charAt(this.at) === ':') {
			this.at++;
			this.settle('operator');
			this.afterCast = true;
		} else this.takeOperator(mark, start);
	}

	private takeOperator(mark: string, start: number): void {
		const sign = (mark === '-' || mark === '+') && this.before === 'operator';
		if (!sign) this.lists.spoil();
		const first = this.signAt >= 0 ? this.signAt : start;
		this.settle('operator');
		if (sign) this.signAt = first;
	}
}

const [DOT, QUOTE, HOLE, DOUBLE_QUOTE, BACK_QUOTE, DOLLAR, MINUS, SLASH] = [46, 39, 63, 34, 96, 36, 45, 47];
const LOWER_E = 101;

function isDigit(code: number): boolean {
	return code >= 48 && code <= 57;
}

/** Blanks that \s knows and no word begins with. */
function isSpaceLike(code: number): boolean {
	return (code >= 11 && code <= 13) || code >= 128;
}

/** Behind the E of E'…' and the U of U&'…' stands a quote or an ampersand. */
function mayBePrefix(next: number): boolean {
	return next === QUOTE || next === 38;
}

function isWordStart(code: number): boolean {
	return (code >= 97 && code <= 122) || (code >= 65 && code <= 90) || code === 95 || code >= 128;
}

/** Behind the closing quote; a doubled quote and, with escapes, one behind a backslash belong to the string. */
function endOfString(sql: string, from: number, escapes: boolean): number {
	for (let at = from; at < sql.length; at++) {
		const code = sql.charCodeAt(at);
		if (code === 92 && escapes) at++;
		else if (code === QUOTE) {
			if (sql.charCodeAt(at + 1) !== QUOTE) return at + 1;
			at++;
		}
	}
	return sql.length;
}

/** Behind the end of a block comment; PostgreSQL's nest. */
function endOfComment(sql: string, from: number): number {
	const mark = /\/\*|\*\//g;
	mark.lastIndex = from;
	let depth = 1;
	for (let match = mark.exec(sql); match !== null; match = mark.exec(sql)) {
		depth += match[0] === '/*' ? 1 : -1;
		if (depth === 0) return mark.lastIndex;
	}
	return sql.length;
}
