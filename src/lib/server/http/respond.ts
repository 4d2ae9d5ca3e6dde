import { error, fail as failAction, type ActionFailure } from '@sveltejs/kit';
import type { Outcome, Problem, ProblemCode } from '$lib/domain/problem';

interface StatusRow {
	status: number;
	title: string;
}

/** The one table from a Problem's code to its HTTP status and phrase. */
const STATUS: Record<ProblemCode, StatusRow> = {
	invalid: { status: 400, title: 'Bad Request' },
	unauthenticated: { status: 401, title: 'Unauthorized' },
	forbidden: { status: 403, title: 'Forbidden' },
	not_found: { status: 404, title: 'Not Found' },
	refused: { status: 409, title: 'Conflict' },
	stale: { status: 412, title: 'Precondition Failed' },
	too_large: { status: 413, title: 'Content Too Large' },
	unsupported: { status: 415, title: 'Unsupported Media Type' },
	conflict: { status: 422, title: 'Unprocessable Content' },
	precondition_required: { status: 428, title: 'Precondition Required' },
	rate_limited: { status: 429, title: 'Too Many Requests' }
};

/** The HTTP status of a Problem. */
export function statusOf(code: ProblemCode): number {
	return STATUS[code].status;
}

/** A Problem as application/problem+json (RFC 9457). */
export function problemResponse(problem: Problem, headers: Record<string, string> = {}): Response {
	const { code, detail, errors, reasons, current, retryAfterSeconds } = problem;
	const { status, title } = STATUS[code];
	const body = { type: 'about:blank', title, status, detail, code, errors, reasons, current };
	const all = new Headers({ ...headers, 'content-type': 'application/problem+json' });
	if (retryAfterSeconds !== undefined) all.set('retry-after', String(Math.ceil(retryAfterSeconds)));
	// RFC 9110 section 11.6.1: a 401 names how one may sign in.
	if (status === 401) all.set('www-authenticate', 'Bearer realm="catchwater"');
	return new Response(JSON.stringify(body), { status, headers: all });
}

interface RespondOptions {
	/** 200 unless given; 204 sends no body. */
	status?: number;
	headers?: Record<string, string>;
	/** Revision of the thing, sent as a strong ETag. */
	etag?: number;
}

/** The answer of an API call: the value as JSON, or its Problem. */
export function respond<T>(outcome: Outcome<T>, options: RespondOptions = {}): Response {
	if (!outcome.ok) return problemResponse(outcome.problem);
	const status = options.status ?? 200;
	const headers = new Headers(options.headers);
	if (options.etag !== undefined) headers.set('etag', toEtag(options.etag));
	if (status === 204) return new Response(null, { status, headers });
	headers.set('content-type', 'application/json');
	return new Response(JSON.stringify(outcome.value), { status, headers });
}

/** A list that has no pages: `{ items }`. */
export function respondItems<T>(outcome: Outcome<T[]>): Response {
	return outcome.ok ? respond({ ok: true, value: { items: outcome.value } }) : respond(outcome);
}

/** A revision as a strong entity tag. */
export function toEtag(revision: number): string {
	return `"${revision}"`;
}

/** The value of an outcome, for a page's load; a Problem becomes Kit's error page. */
export function unwrap<T>(outcome: Outcome<T>): T {
	if (outcome.ok) return outcome.value;
	const { code, detail, reasons } = outcome.problem;
	error(statusOf(code), { message: detail, code, ...(reasons ? { reasons } : {}) });
}

/** What a form shows again after a Problem: what is wrong with which field, and what was typed. */
export interface FormFailure<V> {
	problem: Problem;
	/** The first message for each field that does not fit. */
	issues: Record<string, string>;
	values: V;
}

/** A form action's failure. Never put a password into `values`. */
export function failWith<V>(problem: Problem, values: V): ActionFailure<FormFailure<V>> {
	const issues: Record<string, string> = {};
	for (const { field, message } of problem.errors ?? []) issues[field] ??= message;
	return failAction(statusOf(problem.code), { problem, issues, values });
}
