import { fail } from '$lib/domain/problem';

/** The role allows nothing here. */
export const needsReader = () => fail('forbidden', 'Reading runbooks takes a reader.');

/** There is no runbook of that slug. */
export const noRunbook = (slug: string) => fail('not_found', `There is no runbook ${slug}.`);

/** A move that state, approval or text do not allow, with every reason. */
export const refused = (detail: string, reasons: readonly string[]) =>
	fail('refused', detail, { reasons: [...reasons] });

/** Somebody else wrote a revision meanwhile: what stands there now is handed over. */
export const changedMeanwhile = (slug: string, revision: number, current: unknown) =>
	fail(
		'stale',
		`The runbook ${slug} was changed after revision ${revision}. Nothing was overwritten: look at what stands there now and send it again.`,
		{ current }
	);
