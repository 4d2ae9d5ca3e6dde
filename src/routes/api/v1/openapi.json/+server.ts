import { describeApi } from '$lib/server/api/openapi';
import type { RequestHandler } from './$types';

export const GET = (() =>
	new Response(JSON.stringify(describeApi()), {
		headers: { 'content-type': 'application/json' }
	})) satisfies RequestHandler;
