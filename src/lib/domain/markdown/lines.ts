/** A line of Markdown and whether it stands inside a fenced block (the fences themselves included). */
export interface MarkdownLine {
	text: string;
	/** 1 for the first. */
	number: number;
	/** The info string of the block it is in ("sql"); null: ordinary text. */
	fence: string | null;
	/** The line opens or closes the block. */
	isFence: boolean;
}

const OPENING = /^ {0,3}(`{3,}|~{3,})[ \t]*([^`]*)$/;

/** Marks each line as text or as part of a fenced block (CommonMark 0.31, 4.5 Fenced code blocks). */
export function readLines(markdown: string): MarkdownLine[] {
	let open: { mark: string; info: string } | null = null;
	return markdown.split(/\r?\n/).map((text, index): MarkdownLine => {
		const number = index + 1;
		const found = OPENING.exec(text);
		if (open === null) {
			if (found === null) return { text, number, fence: null, isFence: false };
			open = { mark: found[1] ?? '```', info: (found[2] ?? '').trim().toLowerCase() };
			return { text, number, fence: open.info, isFence: true };
		}
		const { mark, info } = open;
		const closes = found !== null && (found[2] ?? '').trim() === '' && closing(found[1] ?? '', mark);
		if (closes) open = null;
		return { text, number, fence: info, isFence: closes };
	});
}

function closing(candidate: string, mark: string): boolean {
	return candidate[0] === mark[0] && candidate.length >= mark.length;
}
