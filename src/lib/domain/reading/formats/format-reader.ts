import type { Engine, Format, FormatResult, ReadingWarning } from '../reading';

/** A format that is read as a whole text. */
export interface TextFormat {
	format: Format;
	engine: Engine;
	kind: 'plan' | 'log' | 'unknown';
	/** Whether the beginning of a text (up to BOUNDS.headBytes, decoded) is in this format. */
	recognise(head: string): boolean;
	/** The text with its literals masked; masking twice changes nothing. */
	mask(text: string): string;
	/** Reads masked text. Never throws on input. */
	read(text: string): FormatResult;
}

/** A result with nothing in it but warnings. */
export function nothingRead(warnings: ReadingWarning[]): FormatResult {
	return { plans: [], spills: null, hints: null, engineVersion: null, warnings };
}

/** Line and column, both from 1, of a character offset. */
export function positionAt(text: string, offset: number): { line: number; column: number } {
	let line = 1;
	let start = 0;
	for (let at = text.indexOf('\n'); at >= 0 && at < offset; at = text.indexOf('\n', start)) {
		line++;
		start = at + 1;
	}
	return { line, column: offset - start + 1 };
}

/** A format that is read as it comes in, so that its files may be of any length. */
export interface StreamFormat {
	format: Format;
	engine: Engine;
	kind: 'log';
	recognise(head: string): boolean;
	/** Takes text as it comes, gives back whole masked lines; `end` gives the rest. */
	openMasker(): { push(text: string): string; end(): string };
	/** Takes whole masked lines. */
	openReader(): { push(text: string): void; finish(): FormatResult };
}
