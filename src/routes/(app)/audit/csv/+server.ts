import { auditFilter } from '$lib/domain/audit/audit-query';
import * as audit from '$lib/server/audit/audit-service';
import { readQuery } from '$lib/server/http/api';
import { requireActor } from '$lib/server/http/guard';
import { unwrap } from '$lib/server/http/respond';
import type { RequestHandler } from './$types';

/** The lines under the filter as CSV; sent as they are read, however many there are. */
export const GET = ((event) => {
	const filter = unwrap(readQuery(event.url, auditFilter));
	const pieces = unwrap(audit.exportCsv(requireActor(event), filter));
	const body = new ReadableStream<Uint8Array>({
		async pull(controller) {
			const piece = await pieces.next();
			if (piece.done) controller.close();
			else controller.enqueue(new TextEncoder().encode(piece.value));
		},
		async cancel() {
			await pieces.return(undefined);
		}
	});
	return new Response(body, {
		headers: {
			'content-type': 'text/csv; charset=utf-8; header=present',
			'content-disposition': 'attachment; filename="audit.csv"'
		}
	});
}) satisfies RequestHandler;
