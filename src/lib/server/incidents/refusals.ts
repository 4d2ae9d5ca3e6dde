import { fail, type Problem } from '$lib/domain/problem';

interface Refused {
	ok: false;
	problem: Problem;
}

/** There is no incident of that number. */
export function noIncident(number: number): Refused {
	return fail('not_found', `There is no incident ${number}.`);
}

/** The role allows looking, not changing. */
export function needsResponder(): Refused {
	return fail('forbidden', 'Changing an incident takes a responder.');
}

/** Somebody else was faster: what stands there now is handed over. */
export function changedMeanwhile(thing: string, revision: number, current: unknown): Refused {
	return fail(
		'stale',
		`${thing} was changed after revision ${revision}, which this edit is based on. Nothing was overwritten: look at what stands there now and send it again.`,
		{ current }
	);
}
