import { readNumber } from '$lib/server/api/params';
import { config } from '$lib/server/config';
import { requireActor } from '$lib/server/http/guard';
import { unwrap } from '$lib/server/http/respond';
import * as mail from '$lib/server/mail/mail-service';
import type { PageServerLoad } from './$types';

export const load = (async (event) => {
	const id = unwrap(readNumber(event.params.id));
	return { mail: unwrap(await mail.read(requireActor(event), id)), origin: config().origin };
}) satisfies PageServerLoad;
