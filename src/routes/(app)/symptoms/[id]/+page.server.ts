import { requireActor } from '$lib/server/http/guard';
import { unwrap } from '$lib/server/http/respond';
import * as symptoms from '$lib/server/symptoms/symptoms-service';
import type { PageServerLoad } from './$types';

export const load = (async (event) => {
	const symptom = unwrap(await symptoms.read(requireActor(event), event.params.id));
	// The list of incidents needs none of their texts.
	const recent = symptom.recent.map(
		({ narrative: _narrative, resolution: _resolution, ...incident }) => incident
	);
	return { symptom: { ...symptom, recent } };
}) satisfies PageServerLoad;
