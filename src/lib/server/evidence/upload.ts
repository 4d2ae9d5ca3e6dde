/** A file of a request, waiting in the spool as it came: not masked, readable by nobody else. */
export interface Upload {
	/** In the spool. */
	path: string;
	/** As the client called it, without folders. */
	name: string;
	bytes: number;
	/** The client's word; nothing is decided by it. */
	mimeType: string;
	/** Of the bytes as they came, to tell a repeated request from another one. */
	rawSha256: string;
}

const LONGEST_NAME = 200;

/** A client's file name without folders and control characters; `fallback` where nothing is left of it. */
export function cleanName(name: string, fallback: string): string {
	const last = name.split(/[/\\]/).at(-1) ?? '';
	const cleaned = [...last]
		.filter((character) => !isControl(character))
		.join('')
		.trim();
	if (cleaned === '' || cleaned === '.' || cleaned === '..') return fallback;
	return cleaned.length <= LONGEST_NAME ? cleaned : shorten(cleaned);
}

function isControl(character: string): boolean {
	const code = character.codePointAt(0) ?? 0;
	// C0, DEL, C1 and the marks that turn the direction of writing: "gpj.exe" must not look like "exe.jpg".
	return (
		code < 0x20 ||
		(code >= 0x7f && code < 0xa0) ||
		(code >= 0x202a && code <= 0x202e) ||
		(code >= 0x2066 && code <= 0x2069)
	);
}

/** Cuts the middle, so that the ending that people recognise a file by stays. */
function shorten(name: string): string {
	return `${name.slice(0, LONGEST_NAME - 21)}…${name.slice(-20)}`;
}
