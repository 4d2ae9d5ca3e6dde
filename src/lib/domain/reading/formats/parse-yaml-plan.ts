/** What could be read of a YAML plan, and the lines (from 0) that are none. */
export interface YamlPlan {
	documents: Record<string, unknown>[];
	/** Lines that are no YAML, with the number of documents that had begun before each. */
	others: { line: number; text: string; documents: number }[];
}

interface Level {
	column: number;
	map: Record<string, unknown>;
	/** The key whose value follows on deeper lines. */
	open: string | null;
}

const ENTRY = /^([A-Za-z_][^:"]*):(?:\s+(.*))?$/;

/**
 * Reads the YAML that PostgreSQL prints: maps and lists by indentation, strings in double quotes as in JSON, lists
 * of keys in brackets. Nothing else of YAML: no anchors, tags or block scalars, so nothing in it can do harm.
 */
export function parseYamlPlan(lines: readonly string[]): YamlPlan {
	const documents: Record<string, unknown>[] = [];
	const others: YamlPlan['others'] = [];
	let levels: Level[] = [];
	lines.forEach((line, number) => {
		const text = line.trim();
		if (text === '' || text === '---') return;
		let column = line.length - line.trimStart().length;
		let body = text;
		let dashAt: number | null = null;
		while (body.startsWith('- ')) {
			dashAt = column;
			const rest = body.slice(2).trimStart();
			column += body.length - rest.length;
			body = rest;
		}
		const entry = ENTRY.exec(body);
		if (entry === null) {
			if (dashAt === null || !pushScalar(levels, dashAt, body)) {
				others.push({ line: number, text: line, documents: documents.length });
				levels = [];
			}
			return;
		}
		const map = enter(levels, column, dashAt);
		if (map === null) {
			const begins = dashAt !== null || isBeginning(entry[1] ?? '');
			if (!begins) {
				others.push({ line: number, text: line, documents: documents.length });
				return;
			}
			const document: Record<string, unknown> = {};
			documents.push(document);
			levels = [{ column, map: document, open: null }];
		}
		setEntry(levels, entry[1] ?? '', entry[2]);
	});
	return { documents, others };
}

/** auto_explain prints one map and no list. */
function isBeginning(key: string): boolean {
	return key === 'Query Text' || key === 'Plan' || key === 'Node Type';
}

function setEntry(levels: Level[], key: string, value: string | undefined): void {
	const level = levels[levels.length - 1];
	if (level === undefined || key === '__proto__') return;
	level.open = value === undefined ? key : null;
	if (value !== undefined) level.map[key] = scalar(value);
}

/** Goes to the map that an entry at a column belongs to, making it where a key or a list item opens it. */
function enter(levels: Level[], column: number, dashAt: number | null): Record<string, unknown> | null {
	const at = dashAt ?? column;
	let top = levels[levels.length - 1];
	while (top !== undefined && (dashAt === null ? top.column > at : top.column >= at)) {
		levels.pop();
		top = levels[levels.length - 1];
	}
	if (top === undefined) return null;
	if (dashAt === null && top.column === column) return top.map;
	if (top.open === null) return dashAt === null ? top.map : null;
	const map: Record<string, unknown> = {};
	if (dashAt === null) top.map[top.open] = map;
	else listOf(top, top.open).push(map);
	levels.push({ column, map, open: null });
	return map;
}

function pushScalar(levels: Level[], dashAt: number, text: string): boolean {
	let top = levels[levels.length - 1];
	while (top !== undefined && top.column >= dashAt) {
		levels.pop();
		top = levels[levels.length - 1];
	}
	if (top === undefined || top.open === null) return false;
	listOf(top, top.open).push(scalar(text));
	return true;
}

function listOf(level: Level, key: string): unknown[] {
	const known = level.map[key];
	if (Array.isArray(known)) return known;
	const list: unknown[] = [];
	level.map[key] = list;
	return list;
}

/** A string in quotes, a list in brackets, else the word as it stands. */
function scalar(text: string): unknown {
	if (text.startsWith('"') || text.startsWith('[')) {
		if (!text.includes('\\') && text.startsWith('"') && text.endsWith('"') && text.length > 1)
			return text.slice(1, -1);
		try {
			return JSON.parse(text);
		} catch {
			// Cut off or hand-edited: kept as it stands.
			return text.replace(/^"|"$/g, '');
		}
	}
	return text;
}
