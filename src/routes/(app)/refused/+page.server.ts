import { error } from '@sveltejs/kit';
import { requireActor } from '$lib/server/http/guard';
import type { PageServerLoad } from './$types';

/** Shown in place of a page that the person's role does not open (http/refuse.ts). */
export const load = ((event) => {
	const { role } = requireActor(event);
	error(403, { message: `Your role (${role}) does not open this page.`, code: 'forbidden' });
}) satisfies PageServerLoad;
