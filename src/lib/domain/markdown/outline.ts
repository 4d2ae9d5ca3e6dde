import { readLines, type MarkdownLine } from './lines';

/** A heading and the lines under it, up to the next heading of any level. */
export interface Section {
	/** 1 to 6; 0 for what stands before the first heading. */
	level: number;
	title: string;
	/** Line of the heading, 1 for the first; 0 for what stands before it. */
	line: number;
	lines: MarkdownLine[];
}

const HEADING = /^ {0,3}(#{1,6})[ \t]+(.*?)[ \t]*#*[ \t]*$/;

/** The document's sections in order (headings written with #; a # inside a fenced block is none). */
export function readOutline(markdown: string): Section[] {
	const sections: Section[] = [{ level: 0, title: '', line: 0, lines: [] }];
	for (const line of readLines(markdown)) {
		const found = line.fence === null ? HEADING.exec(line.text) : null;
		if (found !== null) {
			sections.push({ level: (found[1] ?? '#').length, title: found[2] ?? '', line: line.number, lines: [] });
		} else sections.at(-1)?.lines.push(line);
	}
	return sections;
}
