import * as health from '$lib/server/health/health-service';
import type { RequestHandler } from './$types';

export const GET: RequestHandler = async () => {
	const state = await health.read();
	if (state) return Response.json(state);
	const detail = 'The database cannot be reached.';
	const problem = {
		type: 'about:blank',
		title: 'Service Unavailable',
		status: 503,
		detail,
		code: 'unavailable'
	};
	return new Response(JSON.stringify(problem), {
		status: 503,
		headers: { 'content-type': 'application/problem+json' }
	});
};
