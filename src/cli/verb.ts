import { parseArgs, type ParseArgsConfig } from 'node:util';
import type { z } from 'zod';

/** One thing that the command line does. */
export interface Verb {
	/** What `--help` prints. */
	help: string;
	/** Answers the exit code: 0, or 1 for a fault. Throws UsageError for what is typed wrongly. */
	run: (args: string[]) => Promise<number>;
}

/** What was typed does not fit; its message says what does. Exit code 2. */
export class UsageError extends Error {}

function isParseFailure(error: unknown): error is Error {
	return (
		error instanceof Error &&
		'code' in error &&
		typeof error.code === 'string' &&
		error.code.startsWith('ERR_PARSE_ARGS')
	);
}

/** Node's own parser of arguments, with its complaints as UsageError. */
export function readArgs<T extends ParseArgsConfig>(config: T): ReturnType<typeof parseArgs<T>> {
	try {
		return parseArgs(config);
	} catch (error) {
		if (isParseFailure(error)) throw new UsageError(error.message);
		throw error;
	}
}

/** Options against a schema whose fields are named as the options are. */
export function readOptions<S extends z.ZodType>(schema: S, values: unknown): z.output<S> {
	const result = schema.safeParse(values);
	if (result.success) return result.data;
	const issue = result.error.issues[0];
	throw new UsageError(`--${issue?.path.join('.') ?? ''}: ${issue?.message ?? 'does not fit.'}`);
}
