import { cautionsFor } from '$lib/domain/caution/classify-statement';
import { readBody } from '$lib/domain/runbook/parse-runbook';
import type { WeighedStep } from '$lib/domain/runbook/publish-gate';
import type { RunbookInput } from '$lib/domain/runbook/runbook-input';

/** Revisions never change, so their cautions are worked out once. */
const weighed = new Map<string, Promise<WeighedStep[]>>();
const KEPT = 500;

/**
 * The steps of a runbook, each with the cautions of its statements by the first engine that it is for.
 * `key` names the revision.
 */
export function weighRunbook(
	key: string,
	input: Pick<RunbookInput, 'body' | 'engines'>
): Promise<WeighedStep[]> {
	const known = weighed.get(key);
	if (known !== undefined) return known;
	const weighing = weighBody(input);
	if (weighed.size >= KEPT) weighed.delete(weighed.keys().next().value ?? '');
	weighed.set(key, weighing);
	// A failure is the caller's to see, and is not kept.
	weighing.catch(() => weighed.delete(key));
	return weighing;
}

/** The same for a text that is not stored. */
export async function weighBody({
	body,
	engines
}: Pick<RunbookInput, 'body' | 'engines'>): Promise<WeighedStep[]> {
	const engine = engines[0] ?? 'unknown';
	return Promise.all(
		readBody(body).steps.map(async (step) => ({
			step,
			cautions: (await Promise.all(step.sql.map((sql) => cautionsFor(engine, null, sql)))).flat()
		}))
	);
}
