/**
 * Takes off what a terminal, a chat or a mail put around a paste, each mark by blanks of the same length, so that
 * every offset (and with it line and column of a warning) still holds.
 */
export function blankDecoration(text: string): string {
	const lines = text.split('\n');
	const filled = lines.filter((line) => line.trim() !== '').length;
	const quoted = lines.filter((line) => QUOTE.test(line)).length > filled / 2;
	const margin = lines.filter((line) => MARGIN.test(line)).length > filled / 3;
	return lines.map((line) => blankLine(line, quoted, margin)).join('\n');
}

/** psql's rules, with and without borders, in both line styles. */
const FRAME = /^[\s>|+\-=\u2500-\u257f]*[-=\u2500-\u257f]{3}[\s|+\-=\u2500-\u257f]*$/;
const HEADER = /^[\s|\u2502>]*QUERY PLAN[\s|\u2502+\u21b5]*$/;
const FENCE = /^[\s>]*(?:```|~~~)\s*\w*\s*$/;
/** "(28 rows)" in the language of the client. */
const FOOTER = /^[\s>]*\(\d+ [^()=]+\)\s*$/;
const QUOTE = /^\s*>/;
/** One value of several lines: psql marks each line but the last in the right margin. */
const MARGIN = /[+\u21b5][ \t]*[|\u2502]?[ \t]*$/;
const BORDER = /^[ \t]*[|\u2502](?=[ \t])/;

function blankLine(line: string, quoted: boolean, margin: boolean): string {
	if (line === '') return line;
	if (FRAME.test(line) || HEADER.test(line) || FENCE.test(line) || FOOTER.test(line))
		return ' '.repeat(line.length);
	let rest = quoted ? line.replace(/^(?:[ \t]*>)+/, blanks) : line;
	if (margin) rest = rest.replace(MARGIN, blanks);
	if (BORDER.test(rest)) rest = rest.replace(BORDER, blanks).replace(/[|\u2502]\s*$/, blanks);
	return rest;
}

function blanks(mark: string): string {
	return ' '.repeat(mark.length);
}
