import { sizingInput } from '$lib/domain/sizing/sizing';
import { receiveUploads } from '$lib/server/evidence/receive-uploads';
import { removeFromSpool } from '$lib/server/evidence/spool';
import { readQuery } from '$lib/server/http/api';
import { requireActor } from '$lib/server/http/guard';
import { failWith } from '$lib/server/http/respond';
import * as readings from '$lib/server/readings/readings-service';
import type { Actions, PageServerLoad } from './$types';

/** The panel's figures as its form sends them by the address; null: none, or figures that don't fit. */
export const load = ((event) => {
	const asked = readQuery(event.url, sizingInput);
	return { asked: asked.ok ? asked.value : null };
}) satisfies PageServerLoad;

export const actions = {
	/** For a browser without JavaScript; the others read here themselves. Nothing is stored. */
	default: async (event) => {
		const actor = requireActor(event);
		const received = await receiveUploads(event, { field: 'evidence' });
		if (!received.ok) return failWith(received.problem, {});
		const { uploads } = received.value;
		try {
			const read = await readings.read(actor, uploads);
			if (!read.ok) return failWith(read.problem, {});
			return { readings: read.value };
		} finally {
			await removeFromSpool(uploads.map((upload) => upload.path));
		}
	}
} satisfies Actions;
