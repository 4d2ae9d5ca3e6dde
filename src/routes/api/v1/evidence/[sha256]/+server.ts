import { Readable } from 'node:stream';
import { attachmentNamed } from '$lib/server/api/disposition';
import * as evidence from '$lib/server/evidence/evidence-service';
import { requireActor } from '$lib/server/http/guard';
import { respond } from '$lib/server/http/respond';
import type { RequestHandler } from './$types';

export const GET = (async (event) => {
	const opened = await evidence.open(requireActor(event), event.params.sha256);
	if (!opened.ok) return respond(opened);
	const { stream, name, bytes, type } = opened.value;
	const headers = {
		'content-type': type,
		'content-length': String(bytes),
		'content-disposition': attachmentNamed(name),
		'content-security-policy': "default-src 'none'; sandbox",
		'x-content-type-options': 'nosniff'
	};
	if (event.request.method === 'HEAD') {
		stream.destroy();
		return new Response(null, { headers });
	}
	return new Response(Readable.toWeb(stream) as ReadableStream<Uint8Array>, { headers });
}) satisfies RequestHandler;
