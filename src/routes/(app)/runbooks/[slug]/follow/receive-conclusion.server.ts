import type { z } from 'zod';
import { ok, type Outcome } from '$lib/domain/problem';
import { receiveUploads } from '$lib/server/evidence/receive-uploads';
import { removeFromSpool } from '$lib/server/evidence/spool';
import type { Upload } from '$lib/server/evidence/upload';
import { toFields, validate } from '$lib/server/http/fields';
import { concludeForm } from './follow-input';

/** What the form of the outcome sends: its fields, and the plan or log that shows it. */
export interface Conclusion {
	input: z.output<typeof concludeForm>;
	/** In the spool; whoever takes them removes them. */
	given: Upload[];
}

/** Receives the form of the outcome; what it brought is removed again where a field doesn't fit. */
export async function receiveConclusion(event: { request: Request }): Promise<{
	conclusion: Outcome<Conclusion>;
	/** As typed, for showing it again. */
	typed: Record<string, string>;
}> {
	const received = await receiveUploads(event, { field: 'evidence' });
	if (!received.ok) return { conclusion: received, typed: {} };
	const { uploads, fields } = received.value;
	const input = validate(
		concludeForm,
		toFields(concludeForm.shape, (name) => (fields[name] === undefined ? [] : [fields[name]]))
	);
	// An empty file field arrives as a file without bytes.
	const given = input.ok ? uploads.filter(({ bytes }) => bytes > 0) : [];
	const left = uploads.filter((upload) => !given.includes(upload));
	await removeFromSpool(left.map(({ path }) => path));
	return { conclusion: input.ok ? ok({ input: input.value, given }) : input, typed: fields };
}
