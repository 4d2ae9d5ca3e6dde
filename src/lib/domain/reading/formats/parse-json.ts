/** What could be read of a JSON text that may be cut or damaged. */
export interface PartialJson {
	value: unknown;
	/** Offset behind the value. */
	end: number;
	/** Offset of the fault at which reading stopped; null: the value is whole. */
	faultAt: number | null;
}

type Container = { list: unknown[] } | { members: Record<string, unknown>; key: string | null };

const TOKEN = /[ \t\r\n]*(?:([[\]{},:])|"((?:[^"\\\n]|\\.)*)"|(-?\d[\d.eE+-]*)|(true|false|null))/y;

/**
 * Reads the JSON value that begins at an offset and keeps what it had read when it meets a fault: every container
 * that is still open is closed there. Iterative, so that nesting can't exhaust the stack.
 */
export function parsePartialJson(text: string, start: number): PartialJson {
	const token = new RegExp(TOKEN);
	token.lastIndex = start;
	const open: Container[] = [];
	let root: unknown;
	let end = start;
	for (;;) {
		const match = token.exec(text);
		if (match === null) return { value: root, end, faultAt: faultOffset(text, end) };
		const tokenStart = end;
		end = token.lastIndex;
		const mark = match[1];
		const top = open[open.length - 1];
		if (mark === ']' || mark === '}') {
			if (top === undefined || 'list' in top !== (mark === ']'))
				return { value: root, end, faultAt: tokenStart };
			open.pop();
		} else if (mark === ',' || mark === ':') {
			continue;
		} else if (mark === undefined && match[2] !== undefined && top && 'members' in top && top.key === null) {
			top.key = unescape(match[2]);
			continue;
		} else {
			const container = mark === '[' ? { list: [] } : mark === '{' ? { members: {}, key: null } : null;
			const value =
				container === null ? scalarOf(match) : 'list' in container ? container.list : container.members;
			if (top === undefined) root = value;
			else put(top, value);
			if (container !== null) open.push(container);
		}
		if (open.length === 0) return { value: root, end, faultAt: null };
	}
}

function put(into: Container, value: unknown): void {
	if ('list' in into) into.list.push(value);
	else if (into.key !== null) {
		// A plain assignment of "__proto__" would change the object's prototype.
		if (into.key !== '__proto__') into.members[into.key] = value;
		into.key = null;
	}
}

function scalarOf(match: RegExpExecArray): unknown {
	if (match[2] !== undefined) return unescape(match[2]);
	if (match[3] !== undefined) return Number(match[3]);
	return match[4] === 'true' ? true : match[4] === 'false' ? false : null;
}

function unescape(raw: string): string {
	if (!raw.includes('\\')) return raw;
	return raw.replace(/\\(?:u([0-9a-fA-F]{4})|(.))/gs, (_all, code: string | undefined, mark: string) => {
		if (code !== undefined) return String.fromCharCode(parseInt(code, 16));
		return { n: '\n', t: '\t', r: '\r', b: '\b', f: '\f' }[mark] ?? mark;
	});
}

function faultOffset(text: string, from: number): number {
	let at = from;
	while (at < text.length && /\s/.test(text.charAt(at))) at++;
	return at;
}
