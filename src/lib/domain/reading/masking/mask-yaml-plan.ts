import { maskStatement } from '../mask-literals';
import { maskSecrets } from '../secrets';
import { maskTextPlan } from './mask-text-plan';
import { isPlainKey } from './plan-keys';

/** Margin, dashes of a list, and the key where there is one; the value follows. */
const ENTRY = /^([\s>|\u2502]*(?:- +)*)(?:([A-Za-z_][^:"']*):(?=\s|$)\s*)?/;
const QUOTED = /^"((?:[^"\\]|\\.)*)("?)/;

/** A YAML plan with its literals masked; layout, keys and figures stay. */
export function maskYamlPlan(text: string): string {
	const out: string[] = [];
	let words: string[] = [];
	let key = '';
	let settingsColumn = -1;
	const flush = () => {
		if (words.length > 0) out.push(maskTextPlan(words.join('\n')));
		words = [];
	};
	for (const line of text.split('\n')) {
		const entry = ENTRY.exec(line);
		const column = entry?.[1]?.length ?? 0;
		const value = line.slice(entry?.[0].length ?? 0);
		if (entry?.[2] === undefined && !(/- $/.test(entry?.[1] ?? '') && /^["[]/.test(value))) {
			words.push(line);
			continue;
		}
		flush();
		if (entry?.[2] !== undefined) key = entry[2];
		if (settingsColumn >= 0 && column <= settingsColumn) settingsColumn = -1;
		if (key === 'Settings') settingsColumn = column;
		const plain = isPlainKey(key) || settingsColumn >= 0;
		out.push(plain ? line : line.slice(0, line.length - value.length) + maskValue(value));
	}
	flush();
	return maskSecrets(out.join('\n'));
}

function maskValue(value: string): string {
	if (value.startsWith('[')) return value.replace(/"(?:[^"\\]|\\.)*"/g, maskQuoted);
	return QUOTED.test(value) ? maskQuoted(value) : value.includes("'") ? maskStatement(value) : value;
}

/** A string in double quotes, perhaps with something behind it or cut off. */
function maskQuoted(value: string): string {
	const quoted = QUOTED.exec(value);
	if (quoted === null) return value;
	const raw = quoted[1] ?? '';
	const text = raw.includes('\\') ? unquote(raw) : raw;
	const masked = maskStatement(text);
	const kept = masked === text ? raw : JSON.stringify(masked).slice(1, -1);
	return `"${kept}${quoted[2] ?? ''}${value.slice(quoted[0].length)}`;
}

function unquote(raw: string): string {
	try {
		const value: unknown = JSON.parse(`"${raw}"`);
		return typeof value === 'string' ? value : raw;
	} catch {
		// Cut off inside an escape: masked as it stands.
		return raw;
	}
}
