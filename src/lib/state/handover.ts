/** A piece of evidence on its way from one page to another: pasted text, or a file as it was chosen. */
export interface HandoverPiece {
	name: string;
	content: string | File;
}

export interface Handover {
	pieces: HandoverPiece[];
}

/** Texts alone survive a full page load; a longer one would not fit into the browser's five megabytes. */
const STORED_CHARACTERS = 2_000_000;
const KEY = 'catchwater.handover';

let waiting: Handover | null = null;

/**
 * Leaves evidence for the next page. Files travel in memory only, so they arrive by a navigation within
 * the application; pasted texts are kept in the session as well and arrive by any.
 */
export function leaveHandover(handover: Handover): void {
	waiting = handover;
	const texts = handover.pieces.filter((piece) => typeof piece.content === 'string');
	const stored = JSON.stringify(texts);
	if (texts.length > 0 && stored.length <= STORED_CHARACTERS) sessionStorage.setItem(KEY, stored);
	else sessionStorage.removeItem(KEY);
}

/** What another page left, once: the second call answers null. */
export function takeHandover(): Handover | null {
	const stored = sessionStorage.getItem(KEY);
	sessionStorage.removeItem(KEY);
	const handover = waiting ?? readStored(stored);
	waiting = null;
	return handover !== null && handover.pieces.length > 0 ? handover : null;
}

function readStored(stored: string | null): Handover | null {
	if (stored === null) return null;
	const pieces: unknown = JSON.parse(stored);
	return Array.isArray(pieces) ? { pieces: pieces.filter(isTextPiece) } : null;
}

function isTextPiece(piece: unknown): piece is { name: string; content: string } {
	return (
		typeof piece === 'object' &&
		piece !== null &&
		'name' in piece &&
		typeof piece.name === 'string' &&
		'content' in piece &&
		typeof piece.content === 'string'
	);
}
