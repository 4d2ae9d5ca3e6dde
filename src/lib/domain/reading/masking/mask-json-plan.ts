import { maskStatement } from '../mask-literals';
import { maskSecrets } from '../secrets';
import { maskTextPlan } from './mask-text-plan';
import { isPlainKey } from './plan-keys';

/** A JSON plan with its literals masked; layout, keys and figures stay. Works on damaged and decorated text. */
export function maskJsonPlan(text: string): string {
	return maskSecrets(hasWordsAround(text) ? maskParts(text) : maskDocument(text));
}

/** Something else than JSON before, between or behind. */
function hasWordsAround(text: string): boolean {
	return (
		!/^\s*[[{]/.test(text) || !/[\]}]\s*$/.test(text) || /\n[ >|]{0,2}[\]}][ \t+|]*\n\s*[^\s[\]{}]/.test(text)
	);
}

/** JSON begins at a line that opens a bracket and ends where one as far left closes; the rest is words and SQL. */
function maskParts(text: string): string {
	const out: string[] = [];
	let part: string[] = [];
	let indent: number | null = null;
	const flush = () => {
		if (part.length > 0)
			out.push(indent === null ? maskTextPlan(part.join('\n')) : maskDocument(part.join('\n')));
		part = [];
	};
	for (const line of text.split('\n')) {
		const column = line.search(/[^\s>|\u2502]/);
		const mark = line.charAt(column);
		if (indent === null && (mark === '[' || mark === '{')) {
			flush();
			indent = column;
			part.push(line);
			if (part.length === 1 && /[\]}][\s+|]*$/.test(line) && line.length > column + 2) {
				flush();
				indent = null;
			}
			continue;
		}
		part.push(line);
		if (indent !== null && (mark === ']' || mark === '}') && column <= indent) {
			flush();
			indent = null;
		}
	}
	flush();
	return out.join('\n');
}

/** Every string of a JSON text, also one that the end of the text cuts off, and the colon that makes it a key. */
const STRING = /"((?:[^"\\]|\\[^])*)(?:"(?:[ \t]*\n?[ \t+]*(:))?|\\?$)/g;

function maskDocument(text: string): string {
	let key = '';
	let settingsEnd = -1;
	let out = '';
	let done = 0;
	const pattern = new RegExp(STRING);
	for (let match = pattern.exec(text); match !== null; match = pattern.exec(text)) {
		const raw = match[1] ?? '';
		if (match[2] !== undefined) {
			key = raw;
			if (key === 'Settings') settingsEnd = text.indexOf('}', pattern.lastIndex);
		} else if (match.index >= settingsEnd && !isPlainKey(key)) {
			const masked = maskString(raw);
			if (masked !== raw) {
				out += text.slice(done, match.index + 1) + masked;
				done = match.index + 1 + raw.length;
			}
		}
		if (pattern.lastIndex === match.index) pattern.lastIndex++;
	}
	const masked = out + text.slice(done);
	// A quotation mark that was lost turns the inside of a string into its outside.
	return masked.includes("'") ? masked.replace(/'(?:[^'"\\\n]|'')*'/g, '?') : masked;
}

function maskString(raw: string): string {
	const value = raw.includes('\\') ? unquote(raw) : raw;
	// A client may have put the whole plan into one string of a row.
	const masked =
		/^\s*[[{]/.test(value) && value.includes('"Node Type"') ? maskDocument(value) : maskStatement(value);
	return masked === value ? raw : JSON.stringify(masked).slice(1, -1);
}

function unquote(raw: string): string {
	try {
		const value: unknown = JSON.parse(`"${raw.replaceAll('\n', '\\n').replaceAll('\t', '\\t')}"`);
		return typeof value === 'string' ? value : raw;
	} catch {
		// A string that the end of the file cut off in an escape: masked as it stands.
		return raw;
	}
}
