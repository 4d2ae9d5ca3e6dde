import { fail, ok, type FieldIssue, type Outcome } from '$lib/domain/problem';
import { receiveUploads } from './receive-uploads';
import { removeFromSpool } from './spool';
import type { Upload } from './upload';

/** Two pieces of evidence that are to be compared. */
export interface UploadPair {
	before: Upload;
	after: Upload;
}

/** What is wrong with the files of a field that carries one; null: nothing. */
function findIssue(field: string, uploads: readonly Upload[]): FieldIssue | null {
	if (uploads.length === 0) return { field, message: `Send one file under the name ${field}.` };
	if (uploads.length === 1) return null;
	return { field, message: `Send one file under the name ${field}, not ${uploads.length}.` };
}

/** Two files out of what came under `before` and `after`; `invalid` names the field where there is not exactly one. */
export function requirePair(
	before: readonly Upload[] = [],
	after: readonly Upload[] = []
): Outcome<UploadPair> {
	const [first] = before;
	const [second] = after;
	const errors = [findIssue('before', before), findIssue('after', after)].filter((issue) => issue !== null);
	return first !== undefined && second !== undefined && errors.length === 0
		? ok({ before: first, after: second })
		: fail('invalid', 'Comparing takes two pieces of evidence: one before, one after.', { errors });
}

/** Receives two pieces of evidence under the names before and after into the spool. */
export async function receivePair(event: { request: Request }): Promise<Outcome<UploadPair>> {
	const received = await receiveUploads(event, { field: 'before', more: ['after'] });
	if (!received.ok) return received;
	const { uploads: before, more } = received.value;
	const pair = requirePair(before, more.after);
	if (!pair.ok) await removeFromSpool([...before, ...(more.after ?? [])].map(({ path }) => path));
	return pair;
}
