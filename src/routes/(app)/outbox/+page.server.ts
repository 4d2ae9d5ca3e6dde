import { pageQuery } from '$lib/domain/incident/incident-filter';
import { readQuery } from '$lib/server/http/api';
import { requireActor } from '$lib/server/http/guard';
import { unwrap } from '$lib/server/http/respond';
import * as mail from '$lib/server/mail/mail-service';
import type { PageServerLoad } from './$types';

export const load = (async (event) => {
	const query = unwrap(readQuery(event.url, pageQuery));
	return {
		page: unwrap(await mail.list(requireActor(event), query)),
		staysHere: mail.staysHere()
	};
}) satisfies PageServerLoad;
