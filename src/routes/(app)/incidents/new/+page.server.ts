import { redirect } from '@sveltejs/kit';
import { receiveUploads } from '$lib/server/evidence/receive-uploads';
import { removeFromSpool } from '$lib/server/evidence/spool';
import { requireActor } from '$lib/server/http/guard';
import { failWith, unwrap } from '$lib/server/http/respond';
import * as incidents from '$lib/server/incidents/incidents-service';
import type { Actions, PageServerLoad } from './$types';
import { readIncidentForm } from '../read-incident-form.server';

export const load = (async (event) => {
	const services = unwrap(await incidents.services(requireActor(event)));
	return { services: services.map(({ service }) => service) };
}) satisfies PageServerLoad;

export const actions = {
	// The body is streamed into the spool, never read as a whole: request.formData() would hold it in memory.
	default: async (event) => {
		const actor = requireActor(event);
		const received = await receiveUploads(event, { field: 'evidence' });
		if (!received.ok) return failWith<Record<string, string>>(received.problem, {});
		const { uploads, fields } = received.value;
		const input = readIncidentForm(fields);
		if (!input.ok) {
			await removeFromSpool(uploads.map(({ path }) => path));
			return failWith(input.problem, fields);
		}
		// An empty file field arrives as a file without a name and without bytes.
		const created = await incidents.create(
			actor,
			input.value,
			uploads.filter(({ bytes }) => bytes > 0)
		);
		if (!created.ok) return failWith(created.problem, fields);
		redirect(303, `/incidents/${created.value.number}`);
	}
} satisfies Actions;
