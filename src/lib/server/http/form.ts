import type { z } from 'zod';
import type { Outcome } from '$lib/domain/problem';
import { toFields, validate } from './fields';

/** Reads a form against the domain's schema. Files are left to receiveUploads. */
export function readForm<S extends z.ZodObject>(form: FormData, schema: S): Outcome<z.output<S>> {
	const readAll = (name: string) => form.getAll(name).filter((value) => typeof value === 'string');
	return validate(schema, toFields(schema.shape, readAll));
}

/** The texts of a form as they were typed, for showing it again. Fields named are left out: passwords. */
export function readTyped(form: FormData, leaveOut: readonly string[] = []): Record<string, string> {
	const typed: Record<string, string> = {};
	for (const [name, value] of form) {
		if (typeof value === 'string' && !leaveOut.includes(name)) typed[name] = value;
	}
	return typed;
}
