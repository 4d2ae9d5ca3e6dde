import { maskStatement } from '../mask-literals';
import { maskSecrets } from '../secrets';
import { isPlainKey } from './plan-keys';

/** Lines that hold figures and names only: operators, psql's decoration, times, prompts without a statement. */
const PLAIN_LINES = [
	/^[\s>|\u2502]*(?:->\s+)?[A-Z][\w "().,:$*-]*? {1,2}\((?:cost=[\d.]+|actual (?:time|rows)=[\d.]+|never executed\))/,
	/^[\s>|\u2502]*->\s+[A-Z][\w ]*?(?: using [^\s']+)?(?: on [^']+)?$/,
	/^[\s>|\u2502]*(?:width|rows|loops)=[\d.]+[\w =.()]*$/,
	/^[\s>|+\-=\u2500-\u257f]*[-=\u2500-\u257f]{3}[\s|+\-=\u2500-\u257f]*$/,
	/^[\s>]*\(\d+ [^()='"\d]+\)\s*$/,
	/^\s*(?:Time|\u0412\u0440\u0435\u043c\u044f|Zeit|Dur\u00e9e|Temps|Duraci\u00f3n|Tiempo)\s?: [\d.,]+ \w+(?: \([\d:.,]+\))?\s*$/,
	/^[\s>|\u2502]*(?:InitPlan|SubPlan) \S+(?: \(returns [$\d, ]*\))?[\s|\u2502]*$/,
	/^[\s>|\u2502]*(?:JIT for worker \d+|Trigger [^:']*: (?:time=[\d.]+ )?calls=\d+)/
];
const PROPERTY = /^([\s>|\u2502]*(?:Worker \d+: {1,2})?)([A-Z][A-Za-z0-9/ -]{0,40}?):(?=\s|$)/;
const SETTINGS = /^[\s>|\u2502]*Settings: /;
/** Lines of names and figures are shorter; a longer one is masked, whatever it looks like. */
const PLAIN_LENGTH = 2_000;
/** How many lines a literal may span before its quote counts as never closed. */
const LITERAL_LINES = 200;

/**
 * A text plan with its literals masked. Lines of operators and figures stay as they are; values of properties are
 * masked one by one; what stands between (statements, words of whoever pasted it) is masked as one text.
 */
export function maskTextPlan(text: string): string {
	const lines = text.split('\n');
	const out: string[] = [];
	let between: string[] = [];
	const flush = () => {
		if (between.length > 0) out.push(maskSecrets(maskStatement(between.join('\n'))));
		between = [];
	};
	for (let i = 0; i < lines.length; i++) {
		const line = lines[i] ?? '';
		if (line === '') {
			between.push(line);
			continue;
		}
		if (isPlainLine(line)) {
			flush();
			out.push(line);
			continue;
		}
		const property = PROPERTY.exec(line);
		if (property === null || property[2] === 'Query Text') {
			between.push(line);
			continue;
		}
		flush();
		if (isPlainKey(property[2] ?? '') || SETTINGS.test(line)) out.push(line);
		else {
			const end = endOfLiteral(lines, i, property[0].length);
			const value = lines
				.slice(i, end + 1)
				.join('\n')
				.slice(property[0].length);
			out.push(maskSecrets(property[0] + maskStatement(value)));
			i = end;
		}
	}
	flush();
	return out.join('\n');
}

/** What every such line holds; most others hold none of it. */
const MAY_BE_PLAIN = /[(=>\u2500-\u257f]|--|: |Plan \d/;

/** What stands above a plan of auto_explain. */
const DURATION = /\bduration: [\d.]+ ms {1,2}plan:\s*$/;

function isPlainLine(line: string): boolean {
	if (line.length > PLAIN_LENGTH || !MAY_BE_PLAIN.test(line)) return false;
	if (line.includes(' plan:') && DURATION.test(line))
		return !/['"$@]/.test(line) && maskSecrets(line) === line;
	return PLAIN_LINES.some((pattern) => pattern.test(line));
}

/** The last line of a value: further down than the first where a string holds line breaks. */
function endOfLiteral(lines: string[], from: number, offset: number): number {
	let open = countQuotes((lines[from] ?? '').slice(offset)) % 2 === 1;
	if (!open) return from;
	for (let i = from + 1; i < lines.length && i < from + LITERAL_LINES; i++) {
		const line = lines[i] ?? '';
		if (countQuotes(line) % 2 === 1) open = !open;
		if (!open) return i;
		if (isPlainLine(line)) break;
	}
	return from;
}

function countQuotes(text: string): number {
	let count = 0;
	for (let at = text.indexOf("'"); at >= 0; at = text.indexOf("'", at + 1)) count++;
	return count;
}
