import type { z } from 'zod';
import { fail, ok, type Outcome } from '$lib/domain/problem';
import { toFields, validate } from './fields';

/** The form that a request carries; `unsupported` for any other body. */
export async function receiveForm(request: Request): Promise<Outcome<FormData>> {
	const type = request.headers.get('content-type') ?? '';
	const isForm = /^(application\/x-www-form-urlencoded|multipart\/form-data)\b/i.test(type);
	if (!isForm) return fail('unsupported', 'Send a form.');
	try {
		return ok(await request.formData());
	} catch (error) {
		// The platform's word for a body that is no such form after all.
		if (error instanceof TypeError) return fail('invalid', 'The body is not the form that it claims to be.');
		throw error;
	}
}

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
