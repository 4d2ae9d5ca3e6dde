import { maskStatement } from '../mask-literals';
import { isSecretName, MASKED, maskSecrets } from '../secrets';
import { maskTextPlan } from './mask-text-plan';
import { isPlainKey } from './plan-keys';

/** A JSON plan with its literals masked; layout, keys and figures stay. Works on damaged and decorated text. */
export function maskJsonPlan(text: string): string {
	return hasWordsAround(text) ? maskParts(text) : maskDocument(text);
}

/** Something else than JSON before, between or behind. */
function hasWordsAround(text: string): boolean {
	if (!/^\s*[[{]/.test(text) || !/[\]}]/.test(text.trimEnd().slice(-1))) return true;
	return /\n[ >|]{0,2}[\]}][ \t+|]*\n\s*[^\s[\]{}]/.test(text);
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

/** Goes from string to string: behind a key stands a colon, the strings behind it are its values. */
function maskDocument(text: string): string {
	let plain = true;
	let secret = false;
	let settingsEnd = -1;
	let out = '';
	let done = 0;
	for (let at = text.indexOf('"'); at >= 0;) {
		const end = endOfString(text, at + 1);
		const raw = text.slice(at + 1, end);
		const colon = colonBehind(text, end + 1);
		if (colon >= 0) {
			// A figure has no string to mask: what key it stands under doesn't matter.
			const figure = isFigureBehind(text, colon + 1);
			plain = !figure && isPlainKey(raw);
			secret = !figure && !plain && isSecretName(raw);
			if (raw === 'Settings') settingsEnd = text.indexOf('}', colon);
		} else if (!plain && at >= settingsEnd) {
			const masked = secret ? MASKED : maskString(raw);
			if (masked !== raw) {
				out += text.slice(done, at + 1) + masked;
				done = end;
			}
		}
		at = end >= text.length ? -1 : text.indexOf('"', end + 1);
	}
	const masked = done === 0 ? text : out + text.slice(done);
	// A quotation mark that was lost turns the inside of a string into its outside.
	return masked.includes("'") ? masked.replace(/'(?:[^'"\\\n]|'')*'/g, '?') : masked;
}

/** Whether the value behind a colon is a number or a word and holds no string. */
function isFigureBehind(text: string, from: number): boolean {
	const code = text.charCodeAt(text.charCodeAt(from) === BLANK ? from + 1 : from);
	return (code >= 48 && code <= 57) || code === 116 || code === 102;
}

/** Offset of the closing quotation mark; the end of the text where it was cut off. */
function endOfString(text: string, from: number): number {
	for (let end = text.indexOf('"', from); end >= 0; end = text.indexOf('"', end + 1)) {
		let slashes = 0;
		while (text.charCodeAt(end - 1 - slashes) === BACKSLASH && end - 1 - slashes >= from) slashes++;
		if (slashes % 2 === 0) return end;
	}
	return text.length;
}

const [TAB, LINE_END, BLANK, PLUS, COLON, BACKSLASH] = [9, 10, 32, 43, 58, 92];

/** Offset of the colon behind a key, perhaps on the next line; -1: what stood before is a value. */
function colonBehind(text: string, from: number): number {
	for (let at = from; at < text.length; at++) {
		const code = text.charCodeAt(at);
		if (code === COLON) return at;
		if (code !== BLANK && code !== TAB && code !== LINE_END && code !== PLUS) return -1;
	}
	return -1;
}

function maskString(raw: string): string {
	const value = raw.includes('\\') ? unquote(raw) : raw;
	// A client may have put the whole plan into one string of a row.
	const masked =
		/^\s*[[{]/.test(value) && value.includes('"Node Type"')
			? maskDocument(value)
			: maskSecrets(maskStatement(value));
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
