import { z } from 'zod';
import { fail, ok, type Outcome } from '$lib/domain/problem';

/**
 * A place in a list: the sort key and the id of the last row shown. Rows added meanwhile neither shift nor
 * repeat what comes after it, as they would with a page number.
 */
export interface Place {
	key: string | number;
	id: number;
}

const content = z.tuple([z.string(), z.union([z.string(), z.number()]), z.number().int()]);

function parseJson(text: string): unknown {
	try {
		return JSON.parse(text);
	} catch {
		// Not a cursor of ours; the schema refuses it below.
		return null;
	}
}

/** The opaque text of a place. `list` names list and order, so that it can't be used on another one. */
export function writeCursor(list: string, place: Place): string {
	return Buffer.from(JSON.stringify([list, place.key, place.id])).toString('base64url');
}

/** The place that a cursor names; null where none was given. */
export function readCursor(list: string, cursor: string | undefined): Outcome<Place | null> {
	if (cursor === undefined) return ok(null);
	const read = content.safeParse(parseJson(Buffer.from(cursor, 'base64url').toString('utf8')));
	if (!read.success || read.data[0] !== list) {
		const message = 'This is not a cursor of this list and order: leave it out to begin at the first page.';
		return fail('invalid', message, { errors: [{ field: 'cursor', message }] });
	}
	return ok({ key: read.data[1], id: read.data[2] });
}

/** Cuts the extra row that tells whether there is a next page, and names its cursor. */
export function cutPage<T>(
	rows: readonly T[],
	limit: number,
	list: string,
	placeOf: (row: T) => Place
): { rows: T[]; next: string | null } {
	const shown = rows.slice(0, limit);
	const last = shown.at(-1);
	if (rows.length <= limit || last === undefined) return { rows: shown, next: null };
	return { rows: shown, next: writeCursor(list, placeOf(last)) };
}
