/**
 * Expected failures are values. A Problem says what is wrong in facts; the sentence in `detail` is written
 * for the person who has to act on it. Its code maps to one HTTP status (server/http/respond.ts).
 */
export type ProblemCode =
	| 'invalid'
	| 'unauthenticated'
	| 'forbidden'
	| 'not_found'
	| 'refused'
	| 'stale'
	| 'too_large'
	| 'unsupported'
	| 'conflict'
	| 'precondition_required'
	| 'rate_limited';

/** One field that does not fit: its name as the client wrote it, and what to do about it. */
export interface FieldIssue {
	field: string;
	message: string;
}

export interface Problem {
	code: ProblemCode;
	/** What is wrong, where, and what to do: one or two plain sentences. */
	detail: string;
	/** Each field that does not fit (code `invalid`). */
	errors?: FieldIssue[];
	/** Every reason of a gate or a move (code `refused`). */
	reasons?: string[];
	/** The thing as it stands now (code `stale`). */
	current?: unknown;
	/** Seconds until another try makes sense (code `rate_limited`). */
	retryAfterSeconds?: number;
}

/** A value, or the Problem that stood in its way. */
export type Outcome<T> = { ok: true; value: T } | { ok: false; problem: Problem };

/** Wraps a value as a success. */
export function ok<T>(value: T): { ok: true; value: T } {
	return { ok: true, value };
}

/** Wraps a failure: `fail('not_found', 'There is no incident 412.')`. */
export function fail(
	code: ProblemCode,
	detail: string,
	facts: Omit<Problem, 'code' | 'detail'> = {}
): { ok: false; problem: Problem } {
	return { ok: false, problem: { code, detail, ...facts } };
}
