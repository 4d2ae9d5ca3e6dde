import { z } from 'zod';
import type { ProblemCode } from '$lib/domain/problem';
import { version } from '../../../../package.json';
import { statusOf } from '../http/respond';
import type { Call, CallAnswer, CallBody, Part } from './call';
import { CALLS } from './calls/calls';
import { INPUTS } from './calls/inputs';
import { problemShape } from './shapes/problem';
import { SHAPES } from './shapes/shape';

type Json = Record<string, unknown>;

const reference = (id: string) => `#/components/schemas/${id}`;

/** Where a schema without an id of its own stands while it is described. */
const UNNAMED = 'Unnamed';

/** Schemas as JSON Schema, each id once; where one stands inside another, a reference. */
function convert(named: ReadonlyMap<string, z.ZodType>, io: 'input' | 'output'): Record<string, Json> {
	const registry = z.registry<{ id: string }>();
	for (const [id, schema] of named) registry.add(schema, { id });
	const { schemas } = z.toJSONSchema(registry, { uri: reference, io });
	return Object.fromEntries(
		Object.entries(schemas).map(([id, { $schema: _schema, $id: _id, ...schema }]) => [id, schema])
	);
}

/** A reference where the schema has an id, the schema itself elsewhere. */
function describe(schema: z.ZodType, io: 'input' | 'output'): Json {
	const named = io === 'input' ? INPUTS : SHAPES;
	for (const [id, known] of named) if (known === schema) return { $ref: reference(id) };
	return convert(new Map([...named, [UNNAMED, schema]]), io)[UNNAMED] ?? {};
}

function describePart(part: Part): Json {
	const file = { type: 'string', contentMediaType: 'application/octet-stream' };
	if (part.json) return { ...describe(part.json, 'input'), description: part.what };
	if (part.kind === 'files') return { type: 'array', items: file, minItems: 1, description: part.what };
	return { ...(part.kind === 'file' ? file : { type: 'string' }), description: part.what };
}

function describeMultipart(parts: readonly Part[]): Json {
	const required = parts.filter((part) => part.required).map((part) => part.name);
	return {
		schema: {
			type: 'object',
			properties: Object.fromEntries(parts.map((part) => [part.name, describePart(part)])),
			...(required.length > 0 ? { required } : {})
		}
	};
}

function describeBody(body: CallBody): Json {
	const content: Json = {};
	if (body.json) content['application/json'] = { schema: describe(body.json, 'input') };
	if (body.mergePatch)
		for (const type of ['application/merge-patch+json', 'application/json'])
			content[type] = { schema: describe(body.mergePatch, 'input') };
	if (body.multipart) content['multipart/form-data'] = describeMultipart(body.multipart);
	for (const type of body.raw ?? []) content[type] = { schema: {} };
	return { content, required: body.required };
}

const HEADERS: Record<string, Json> = {
	etag: { description: 'The revision as a strong tag, for If-Match.', schema: { type: 'string' } },
	location: { description: 'Where it is.', schema: { type: 'string' } },
	link: { description: 'The next page, rel="next", where there is one.', schema: { type: 'string' } }
};

function describeAnswer(answer: CallAnswer): Json {
	const content = answer.shape
		? { 'application/json': { schema: describe(answer.shape, 'output') } }
		: answer.file && { 'application/octet-stream': { schema: {} } };
	const headers = (answer.headers ?? []).map((name) => [name === 'etag' ? 'ETag' : name, HEADERS[name]]);
	return {
		description: answer.what,
		...(content ? { content } : {}),
		...(headers.length > 0 ? { headers: Object.fromEntries(headers) as Json } : {})
	};
}

/** What can go wrong with every call that is made like this one. */
function problemsOf(call: Call): ProblemCode[] {
	const codes: ProblemCode[] = call.isOpen ? [] : ['unauthenticated', 'forbidden'];
	if (call.path.includes('{')) codes.push('not_found');
	if (call.query || call.body) codes.push('invalid');
	if (call.body) codes.push('too_large', 'unsupported');
	if (call.method === 'patch') codes.push('precondition_required', 'stale');
	if (call.method === 'post') codes.push('refused', 'conflict');
	return [...new Set([...codes, ...(call.problems ?? [])])];
}

function describeProblems(call: Call): Json {
	return Object.fromEntries(
		problemsOf(call).map((code) => [
			String(statusOf(code)),
			{
				description: code,
				content: { 'application/problem+json': { schema: { $ref: reference('Problem') } } }
			}
		])
	);
}

function describePathParameters(call: Call): Json[] {
	return [...call.path.matchAll(/\{(\w+)\}/g)].map(([, name = '']) => {
		const given = call.params?.[name];
		const schema = given ? describe(given, 'input') : { type: 'integer', minimum: 1 };
		return { name, in: 'path', required: true, schema };
	});
}

function describeQuery(call: Call): Json[] {
	return Object.entries(call.query?.shape ?? {}).map(([name, schema]) => {
		const { description, ...described } = describe(schema as z.ZodType, 'input');
		return {
			name,
			in: 'query',
			required: !(schema as z.ZodType).safeParse(undefined).success,
			...(typeof description === 'string' ? { description } : {}),
			schema: described
		};
	});
}

const IF_MATCH = {
	name: 'If-Match',
	in: 'header',
	required: true,
	description: 'The ETag of the revision that the edit is based on.',
	schema: { type: 'string', examples: ['"7"'] }
};
const IDEMPOTENCY_KEY = {
	name: 'Idempotency-Key',
	in: 'header',
	required: false,
	description: 'Kept for 24 h: the same key and body get the first answer again.',
	schema: { type: 'string', minLength: 1, maxLength: 200 }
};

function describeCall(call: Call): Json {
	const parameters = [
		...describePathParameters(call),
		...describeQuery(call),
		...(call.method === 'patch' ? [IF_MATCH] : []),
		...(call.method === 'post' ? [IDEMPOTENCY_KEY] : [])
	];
	return {
		operationId: call.id,
		summary: call.summary,
		tags: [call.group],
		...(call.isOpen ? { security: [] } : {}),
		...(parameters.length > 0 ? { parameters } : {}),
		...(call.body ? { requestBody: describeBody(call.body) } : {}),
		responses: {
			[String(call.answer.status)]: describeAnswer(call.answer),
			...describeProblems(call)
		}
	};
}

function describePaths(): Json {
	const paths: Record<string, Json> = {};
	for (const call of CALLS) {
		const path = `/api/v1${call.path}`;
		paths[path] = { ...paths[path], [call.method]: describeCall(call) };
	}
	return paths;
}

let document: Json | null = null;

/** The API in OpenAPI 3.1, worked out from the schemas that the calls themselves use. */
export function describeApi(): Json {
	document ??= {
		openapi: '3.1.0',
		info: {
			title: 'Catchwater',
			version,
			description:
				'Every error is application/problem+json (RFC 9457). Edits are merge patches with If-Match. ' +
				'Fields of a request that a schema does not name are ignored.'
		},
		servers: [{ url: '/' }],
		security: [{ token: [] }, { session: [] }],
		paths: describePaths(),
		components: {
			securitySchemes: {
				token: { type: 'http', scheme: 'bearer', description: 'A token of a person: cw_…' },
				session: { type: 'apiKey', in: 'cookie', name: 'catchwater_session' }
			},
			schemas: {
				...convert(SHAPES, 'output'),
				...convert(INPUTS, 'input'),
				Problem: describe(problemShape, 'output')
			}
		}
	};
	return document;
}
