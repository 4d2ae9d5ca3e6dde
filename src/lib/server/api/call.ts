import type { z } from 'zod';
import type { ProblemCode } from '$lib/domain/problem';

/** A file or text of a multipart request. */
export interface Part {
	name: string;
	what: string;
	kind: 'file' | 'files' | 'text';
	/** The part holds JSON of this schema. */
	json?: z.ZodType;
	required?: boolean;
}

/** What a call takes as its body; several kinds stand side by side. */
export interface CallBody {
	json?: z.ZodType;
	/** RFC 7396; documented beside plain JSON, which means the same here. */
	mergePatch?: z.ZodType;
	multipart?: Part[];
	/** Media types of a body that is one file. */
	raw?: string[];
	required: boolean;
}

/** What a call answers when it goes well. */
export interface CallAnswer {
	status: 200 | 201 | 204;
	what: string;
	/** Left out: no body, or a file. */
	shape?: z.ZodType;
	/** A file is sent, of no media type that anything renders. */
	file?: true;
	headers?: ('etag' | 'location' | 'link')[];
}

/** One call of the API, as the document describes it. */
export interface Call {
	method: 'get' | 'post' | 'patch' | 'put' | 'delete';
	/** Under /api/v1, parameters in braces. */
	path: string;
	/** Unique in the document; what a generated client calls it. */
	id: string;
	summary: string;
	group: string;
	query?: z.ZodObject;
	/** Schemas of path parameters that are not whole numbers. */
	params?: Record<string, z.ZodType>;
	body?: CallBody;
	answer: CallAnswer;
	/** Refusals besides those that every call of its kind knows. */
	problems?: ProblemCode[];
	/** Needs no sign-in. */
	isOpen?: true;
}
