/**
 * Takes off what a terminal, a chat or a mail put around a paste, each mark by blanks of the same length, so that
 * every offset (and with it line and column of a warning) still holds.
 */
export function blankDecoration(text: string): string {
	return text
		.replace(/\u00a0/g, ' ')
		.replace(/[\u201c\u201d\u201e\u201f]/g, '"')
		.replace(/^.*$/gm, blankLine);
}

const FRAME = /^[\s|+\-=\u2500-\u257f]*[-=\u2500-\u257f]{3}[\s|+\-=\u2500-\u257f]*$/;
const HEADER = /^[\s|\u2502>]*QUERY PLAN[\s|\u2502]*$/;
const FENCE = /^[\s>]*(?:```|~~~)\s*\w*\s*$/;
const FOOTER = /^[\s>]*\(\d+ [^()]+\)\s*$/;

function blankLine(line: string): string {
	if (FRAME.test(line) || HEADER.test(line) || FENCE.test(line) || FOOTER.test(line))
		return ' '.repeat(line.length);
	return line
		.replace(/^(?:\s*>)+/, (marks) => ' '.repeat(marks.length))
		.replace(/^\s*[|\u2502](?=\s)/, (mark) => ' '.repeat(mark.length))
		.replace(/(?<=[\s[\]{},"\d])(?:[+\u21b5]\s*[|\u2502]?|[|\u2502])\s*$/, (mark) => ' '.repeat(mark.length));
}
