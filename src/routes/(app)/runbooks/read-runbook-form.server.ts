import { fail, type ActionFailure } from '@sveltejs/kit';
import type { Outcome, Problem } from '$lib/domain/problem';
import { compareRevisions, type FieldChange, type TextPart } from '$lib/domain/runbook/compare-revisions';
import type { Runbook } from '$lib/domain/runbook/runbook';
import {
	previewInput,
	runbookInput,
	runbookPatch,
	type PreviewInput,
	type RunbookInput
} from '$lib/domain/runbook/runbook-input';
import { readValues, type RunbookValues } from '$lib/domain/runbook/runbook-values';
import { validate } from '$lib/server/http/fields';
import { receiveForm } from '$lib/server/http/form';
import { failWith, type FormFailure } from '$lib/server/http/respond';

/** The form as it was sent. */
export interface SentForm {
	values: RunbookValues;
	/** The revision that the form was drawn from; 0: a new runbook, or none was named. */
	revision: number;
}

/** Reads the form of a runbook; `unsupported` for any other body. */
export async function receiveRunbookForm(request: Request): Promise<Outcome<SentForm>> {
	const received = await receiveForm(request);
	if (!received.ok) return received;
	const form = received.value;
	const readAll = (name: string) => form.getAll(name).filter((value) => typeof value === 'string');
	const revision = readAll('revision')[0] ?? '';
	return {
		ok: true,
		value: { values: readValues(readAll), revision: /^\d{1,9}$/.test(revision) ? Number(revision) : 0 }
	};
}

const schema = runbookInput.extend({ note: runbookPatch.shape.note });

/** What was typed against the schema of a runbook. */
export function toRunbookInput(
	values: RunbookValues
): Outcome<RunbookInput & { note?: string | null | undefined }> {
	const days = values.reviewEveryDays.trim();
	return validate(schema, {
		...values,
		reviewEveryDays: /^\d{1,6}$/.test(days) ? Number(days) : undefined,
		note: values.note.trim() === '' ? null : values.note
	});
}

/** What of it a preview needs; an engine that is none is left out. */
export function toPreviewInput({ body, engines }: RunbookValues): Outcome<PreviewInput> {
	return validate(previewInput, { body, engines });
}

/** Somebody was faster: what stands there now, beside what was typed. */
export interface StaleTexts {
	revision: number;
	fields: FieldChange[];
	body: TextPart[];
}

/** Compares what stands there now with what was typed; null: the problem is another one. */
function compareStale(problem: Problem, slug: string, typed: RunbookInput): StaleTexts | null {
	if (problem.code !== 'stale') return null;
	const current = problem.current as Runbook;
	const { fields, body } = compareRevisions(
		slug,
		{ revision: current.revision, input: current, steps: [] },
		{ revision: current.revision, input: typed, steps: [] }
	);
	return { revision: current.revision, fields, body };
}

/** What the form shows again. */
export interface RunbookFailure extends FormFailure<RunbookValues | null> {
	stale: StaleTexts | null;
}

/** A refusal of the form, with both texts where somebody was faster. `values` is null: nothing could be read. */
export function refuseForm(
	problem: Problem,
	values: RunbookValues | null,
	typed: { slug: string; input: RunbookInput } | null = null
): ActionFailure<RunbookFailure> {
	const { status, data } = failWith({ ...problem, current: undefined }, values);
	const stale = typed === null ? null : compareStale(problem, typed.slug, typed.input);
	return fail(status, { ...data, stale });
}
