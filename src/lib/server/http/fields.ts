import { z } from 'zod';
import { fail, ok, type FieldIssue, type Outcome } from '$lib/domain/problem';

/** What a field of a schema takes, as far as text has to be turned into it. */
interface FieldKind {
	type: string;
	isNullable: boolean;
	element: FieldKind | null;
}

/** Looks through optional, nullable, default and pipe at the type below. */
function kindOf(schema: z.core.$ZodType): FieldKind {
	let inner = schema;
	let isNullable = false;
	for (;;) {
		if (inner instanceof z.ZodNullable) {
			isNullable = true;
			inner = inner.unwrap();
		} else if (
			inner instanceof z.ZodOptional ||
			inner instanceof z.ZodDefault ||
			inner instanceof z.ZodPrefault
		) {
			inner = inner.unwrap();
		} else if (inner instanceof z.ZodPipe) {
			inner = inner.in;
		} else break;
	}
	const element = inner instanceof z.ZodArray ? kindOf(inner.element) : null;
	return { type: inner._zod.def.type, isNullable, element };
}

function toValue(text: string, kind: FieldKind): unknown {
	if (kind.type === 'number') return /^-?\d+(\.\d+)?$/.test(text.trim()) ? Number(text) : text;
	if (kind.type === 'boolean') {
		if (['on', 'true', '1'].includes(text)) return true;
		return ['off', 'false', '0'].includes(text) ? false : text;
	}
	return text;
}

/**
 * Turns named texts (a form, a query) into what the schema's fields take: numbers, booleans, lists. An empty
 * text counts as null where the schema takes null, and as left out otherwise.
 */
export function toFields(
	shape: Record<string, z.core.$ZodType>,
	readAll: (name: string) => string[]
): Record<string, unknown> {
	const fields: Record<string, unknown> = {};
	for (const [name, schema] of Object.entries(shape)) {
		const kind = kindOf(schema);
		const texts = readAll(name);
		if (kind.element) {
			const { element } = kind;
			const values = texts.filter((text) => text !== '').map((text) => toValue(text, element));
			if (values.length > 0) fields[name] = values;
			continue;
		}
		const text = texts[0];
		if (text === undefined) continue;
		if (text !== '') fields[name] = toValue(text, kind);
		else if (kind.isNullable) fields[name] = null;
	}
	return fields;
}

/** `labels[2]`, `steps[0].number`: where a value stands, as a client would write it. */
function toFieldName(path: readonly PropertyKey[]): string {
	let name = '';
	for (const part of path) {
		if (typeof part === 'number') name += `[${part}]`;
		else name += name === '' ? String(part) : `.${String(part)}`;
	}
	return name;
}

/** A schema's verdict as an Outcome: code `invalid` with every field that doesn't fit. */
export function validate<S extends z.ZodType>(schema: S, value: unknown): Outcome<z.output<S>> {
	const result = schema.safeParse(value);
	if (result.success) return ok(result.data);
	const errors: FieldIssue[] = result.error.issues.map((issue) => ({
		field: toFieldName(issue.path),
		message: issue.message
	}));
	const names = [...new Set(errors.map((issue) => issue.field).filter((name) => name !== ''))];
	const detail =
		names.length > 0 ? `Correct ${names.join(', ')}.` : (errors[0]?.message ?? 'The value does not fit.');
	return fail('invalid', detail, { errors });
}
