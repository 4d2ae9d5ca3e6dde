import type { ServerInit } from '@sveltejs/kit';
import { sequence } from '@sveltejs/kit/hooks';
import { startServer } from '$lib/server/start';
import { shapeApiErrors } from '$lib/server/http/handles/api-problems';
import { denyByDefault } from '$lib/server/http/handles/default-deny';
import { checkOrigin } from '$lib/server/http/handles/origin';
import { nameRequest } from '$lib/server/http/handles/request-id';
import { setSecurityHeaders } from '$lib/server/http/handles/security-headers';
import { readSession } from '$lib/server/http/handles/session';
import { theme } from '$lib/server/http/handles/theme';
import { readToken } from '$lib/server/http/handles/token';

export { handleError } from '$lib/server/http/handle-error';

export const init: ServerInit = startServer;

export const handle = sequence(
	nameRequest,
	setSecurityHeaders,
	shapeApiErrors,
	checkOrigin,
	readSession,
	readToken,
	denyByDefault,
	theme
);
