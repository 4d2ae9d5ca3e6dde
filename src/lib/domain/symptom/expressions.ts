/**
 * Reads conditions as PostgreSQL prints them (ruleutils.c: every operator in brackets of its own), literals masked or not.
 * Just enough of the grammar to tell a column from a function of a column; what it doesn't understand wraps nothing.
 */
export interface Token {
	kind:
		| 'word'
		| 'quoted-word'
		| 'literal'
		| 'parameter'
		| 'open'
		| 'close'
		| 'cast'
		| 'operator'
		| 'comma'
		| 'dot';
	text: string;
}

const TOKEN =
	/\s+|(?<literal>[EBXN]?'(?:[^']|'')*'|\?|\d+(?:\.\d+)?(?:e[+-]?\d+)?)|(?<parameter>\$\d+)|(?<word>[A-Za-z_\u0080-\uffff][\w$\u0080-\uffff]*)|(?<quoted>"(?:[^"]|"")*")|(?<open>[([])|(?<close>[)\]])|(?<cast>::)|(?<comma>,)|(?<dot>\.)|(?<operator>[-+*/<>=~!@#%^&|`]+)|(?<other>.)/gsy;

/** Words that are no columns, and no functions where a bracket follows. */
const KEYWORDS = new Set(
	'and or not is null true false any all array row in like ilike between symmetric distinct from case when then else end as collate at time zone over exists interval unknown document escape similar to current_date current_time current_timestamp localtime localtimestamp current_user session_user user current_role current_schema current_catalog'.split(
		' '
	)
);

/** Type names of more than one word. */
const LONG_TYPES: Record<string, readonly string[]> = {
	timestamp: ['with', 'without', 'time', 'zone'],
	time: ['with', 'without', 'time', 'zone'],
	double: ['precision'],
	character: ['varying'],
	bit: ['varying'],
	interval: ['year', 'month', 'day', 'hour', 'minute', 'second', 'to']
};

/** The tokens of a condition; white space is dropped. */
export function tokenise(text: string): Token[] {
	const tokens: Token[] = [];
	TOKEN.lastIndex = 0;
	for (let match = TOKEN.exec(text); match !== null; match = TOKEN.exec(text)) {
		const groups = match.groups ?? {};
		if (groups.literal !== undefined) tokens.push({ kind: 'literal', text: groups.literal });
		else if (groups.parameter !== undefined) tokens.push({ kind: 'parameter', text: groups.parameter });
		else if (groups.word !== undefined) tokens.push({ kind: 'word', text: groups.word });
		else if (groups.quoted !== undefined) tokens.push({ kind: 'quoted-word', text: groups.quoted });
		else if (groups.open !== undefined) tokens.push({ kind: 'open', text: groups.open });
		else if (groups.close !== undefined) tokens.push({ kind: 'close', text: groups.close });
		else if (groups.cast !== undefined) tokens.push({ kind: 'cast', text: groups.cast });
		else if (groups.comma !== undefined) tokens.push({ kind: 'comma', text: groups.comma });
		else if (groups.dot !== undefined) tokens.push({ kind: 'dot', text: groups.dot });
		else if (groups.operator !== undefined) tokens.push({ kind: 'operator', text: groups.operator });
	}
	return tokens;
}

/** A condition taken apart at AND and OR down to single comparisons, each without its outer brackets. */
export function splitComparisons(tokens: readonly Token[]): Token[][] {
	const found: Token[][] = [];
	const open: Token[][] = [stripBrackets(tokens)];
	for (let next = open.pop(); next !== undefined; next = open.pop()) {
		const parts = splitAtTop(next, (token) => isWord(token, 'and') || isWord(token, 'or'));
		if (parts.length > 1) open.push(...parts.map(stripBrackets).reverse());
		else if (next[0] !== undefined && isWord(next[0], 'not')) open.push(stripBrackets(next.slice(1)));
		else if (next.length > 0) found.push(next);
	}
	return found;
}

/** How many conditions are joined by AND at the top: "(a AND b AND (c OR d))" has 3. */
export function countPredicates(condition: string | null): number {
	if (condition === null || condition.trim() === '') return 0;
	return splitAtTop(stripBrackets(tokenise(condition)), (token) => isWord(token, 'and')).length;
}

/** Left and right side of a comparison; null where the tokens are none. */
export function splitComparison(
	tokens: readonly Token[]
): { left: Token[]; operator: string; right: Token[] } | null {
	let depth = 0;
	for (let at = 0; at < tokens.length; at++) {
		const token = tokens[at];
		if (token === undefined) break;
		if (token.kind === 'open') depth++;
		else if (token.kind === 'close') depth--;
		else if (depth === 0 && isComparison(token)) {
			return {
				left: stripBrackets(tokens.slice(0, at)),
				operator: token.text,
				right: stripBrackets(tokens.slice(at + 1))
			};
		}
	}
	return null;
}

/** Comparing operators: = <> < > <= >= and the matching ones (~~ is LIKE); arithmetic and "->>" are none. */
function isComparison(token: Token): boolean {
	if (token.kind === 'operator') return /^(=|<>|!=|<=?|>=?|!?~{1,2}\*?|@>|<@|&&|@@)$/.test(token.text);
	return token.kind === 'word' && /^is$/i.test(token.text);
}

function isWord(token: Token, word: string): boolean {
	return token.kind === 'word' && token.text.toLowerCase() === word;
}

/** Takes off pairs of brackets that embrace everything. */
export function stripBrackets(tokens: readonly Token[]): Token[] {
	let rest = [...tokens];
	while (rest[0]?.kind === 'open' && closesAtEnd(rest)) rest = rest.slice(1, -1);
	return rest;
}

function closesAtEnd(tokens: readonly Token[]): boolean {
	let depth = 0;
	for (let at = 0; at < tokens.length; at++) {
		if (tokens[at]?.kind === 'open') depth++;
		else if (tokens[at]?.kind === 'close') depth--;
		if (depth === 0) return at === tokens.length - 1;
	}
	return false;
}

function splitAtTop(tokens: readonly Token[], at: (token: Token) => boolean): Token[][] {
	const parts: Token[][] = [[]];
	let depth = 0;
	for (const token of tokens) {
		if (token.kind === 'open') depth++;
		else if (token.kind === 'close') depth--;
		if (depth === 0 && at(token)) parts.push([]);
		else parts.at(-1)?.push(token);
	}
	return parts;
}

/** What one side of a comparison does with columns. */
export interface SideFindings {
	/** Columns named, without their table's alias. */
	columns: string[];
	/** The alias before each column, as written; null: none. */
	aliases: (string | null)[];
	/** Types that something holding a column is cast to. */
	casts: string[];
	/** Functions called with a column inside. */
	functions: string[];
	/** Arithmetic (or ||) on a column. */
	arithmetic: boolean;
	/** Reaches into JSON (-> or ->>). */
	json: boolean;
}

/** Columns of an expression and what is done with them. */
export function inspectSide(tokens: readonly Token[]): SideFindings {
	const findings: SideFindings = {
		columns: [],
		aliases: [],
		casts: [],
		functions: [],
		arithmetic: false,
		json: false
	};
	const calls: { name: string | null; columnsBefore: number }[] = [];
	let operators = 0;
	for (let at = 0; at < tokens.length; at++) {
		const token = tokens[at];
		if (token === undefined) break;
		if (token.kind === 'open')
			calls.push({ name: calledName(tokens, at), columnsBefore: findings.columns.length });
		else if (token.kind === 'close') {
			const call = calls.pop();
			if (call !== undefined && call.name !== null && findings.columns.length > call.columnsBefore)
				findings.functions.push(call.name);
		} else if (token.kind === 'cast') {
			const type = readType(tokens, at + 1);
			if (castsColumn(tokens, at)) findings.casts.push(type.name);
			at = type.end - 1;
		} else if (token.kind === 'operator') {
			if (/^#?->>?$|^#>>?$/.test(token.text)) findings.json = true;
			else if (/^[-+*/%^]$|^\|\|$/.test(token.text)) operators++;
		} else if (isColumn(tokens, at)) {
			findings.columns.push(token.text);
			findings.aliases.push(tokens[at - 1]?.kind === 'dot' ? (tokens[at - 2]?.text ?? null) : null);
		}
	}
	findings.arithmetic = operators > 0 && findings.columns.length > 0;
	return findings;
}

function calledName(tokens: readonly Token[], open: number): string | null {
	const before = tokens[open - 1];
	if (before === undefined || tokens[open]?.text !== '(') return null;
	if (before.kind === 'quoted-word') return before.text.replaceAll('"', '');
	if (before.kind !== 'word' || KEYWORDS.has(before.text.toLowerCase())) return null;
	return before.text;
}

/** Whether the word names a column: no keyword, no function, no alias before a dot, no field of EXTRACT, no subplan. */
function isColumn(tokens: readonly Token[], at: number): boolean {
	const token = tokens[at];
	if (token === undefined || (token.kind !== 'word' && token.kind !== 'quoted-word')) return false;
	if (token.kind === 'word' && KEYWORDS.has(token.text.toLowerCase())) return false;
	const next = tokens[at + 1];
	if (next?.kind === 'dot' || next?.text === '(') return false;
	if (next !== undefined && isWord(next, 'from')) return false;
	return (
		!/^(SubPlan|InitPlan|hashed|alternatives)$/.test(token.text) && !/^(rescan|col)\d*$/.test(token.text)
	);
}

/** Whether what stands before "::" is or holds a column. */
function castsColumn(tokens: readonly Token[], cast: number): boolean {
	if (tokens[cast - 1]?.kind !== 'close') return isColumn(tokens, cast - 1);
	let depth = 0;
	for (let at = cast - 1; at >= 0; at--) {
		if (tokens[at]?.kind === 'close') depth++;
		else if (tokens[at]?.kind === 'open') depth--;
		else if (isColumn(tokens, at)) return true;
		if (depth === 0) return false;
	}
	return false;
}

function readType(tokens: readonly Token[], start: number): { name: string; end: number } {
	const first = tokens[start];
	if (first === undefined) return { name: '', end: start };
	let end = start + 1;
	let name = first.text.toLowerCase();
	const more = LONG_TYPES[name] ?? [];
	for (; more.includes(tokens[end]?.text.toLowerCase() ?? ''); end++) name += ` ${tokens[end]?.text ?? ''}`;
	// "(10,2)" and "[]"
	while (
		tokens[end]?.kind === 'open' &&
		/^[[(]$/.test(tokens[end]?.text ?? '') &&
		isTypeModifier(tokens, end)
	) {
		while (tokens[end] !== undefined && tokens[end]?.kind !== 'close') end++;
		end++;
		for (; more.includes(tokens[end]?.text.toLowerCase() ?? ''); end++) name += ` ${tokens[end]?.text ?? ''}`;
	}
	return { name, end };
}

function isTypeModifier(tokens: readonly Token[], open: number): boolean {
	for (let at = open + 1; at < tokens.length; at++) {
		const kind = tokens[at]?.kind;
		if (kind === 'close') return true;
		if (kind !== 'literal' && kind !== 'comma') return false;
	}
	return false;
}
