import { formatBytes, formatMs } from '../../sizing/units';
import type { SymptomId } from '../../symptom/symptom';
import type { Reading } from '../reading';
import { listWords, toSentence, type Compared } from './compared';
import { differs, joinFigures, LEAST_MS, sayMove } from './differences';
import { sayBetter } from './say-better';
import { sayWorse } from './say-worse';
import { SPILLS } from './spilled';

/** Symptoms whose end or beginning the sentences tell in their own words. */
const TOLD: readonly SymptomId[] = [
	...SPILLS,
	'row-underestimate',
	'row-overestimate',
	'build-side-larger',
	'no-runtime-figures',
	'told-in-words'
];
/** Settings whose change is a remedy of its own; a plan prints them only where they differ from the default. */
const MEMORY_SETTINGS = ['work_mem', 'hash_mem_multiplier'];
const MOST_SETTINGS = 3;

/** The answer in a few sentences: what stands in the way of comparing, time, what got better, what did not. */
export function sayComparison(compared: Compared): string {
	const obstacle = sayIncomparable(compared);
	if (obstacle !== null) return obstacle;
	const better = sayBetter(compared);
	const cured = better.some((clause) => /no longer overflows?$/.test(clause));
	const worse = sayWorse(compared, cured);
	const isSame = better.length === 0 && !hasChanged(compared);
	const settings = saySettings(compared);
	return [
		...sayReservations(compared),
		...(isSame ? [sayUnchanged(compared)] : sayTime(compared)),
		...(settings === null ? [] : [settings]),
		...sayFiles(compared),
		...(better.length === 0 ? [] : [toSentence(better.join(', '))]),
		...worse,
		...saySymptoms(compared)
	].join(' ');
}

function sayWhat({ kind }: Reading): string {
	return kind === 'unknown' ? 'neither a plan nor a log that can be read' : `a ${kind}`;
}

/** Why there is nothing to hold beside each other; null: there is. */
function sayIncomparable({ before, after }: Compared): string | null {
	const comparable =
		(before.plan !== null && after.plan !== null) || (before.spills !== null && after.spills !== null);
	if (comparable) return null;
	return before.kind === after.kind
		? before.kind === 'unknown'
			? 'Neither is a plan or a log that can be read, so there is nothing to compare.'
			: `Both are ${sayWhat(before)}, but there is nothing in them to compare.`
		: `Before is ${sayWhat(before)}, after ${sayWhat(after)}: only two plans, or two logs, can be compared.`;
}

function sayReservations({ before, after, pairs }: Compared): string[] {
	const said: string[] = [];
	if (before.engine !== after.engine && before.engine !== 'unknown' && after.engine !== 'unknown')
		said.push('The two plans are of different engines.');
	if (before.statement !== null && after.statement !== null) {
		if (before.statement.fingerprint !== after.statement.fingerprint)
			said.push(
				'These are two different statements, so figures compare only as far as both do the same work.'
			);
	} else if (before.plan !== null && after.plan !== null && !sharesTable(pairs))
		said.push('The two plans read no table in common: they are probably of different statements.');
	const without = [...(lacksRun(before) ? ['before'] : []), ...(lacksRun(after) ? ['after'] : [])];
	if (without.length === 2) said.push('Both plans hold estimates only: what happened can’t be compared.');
	else if (without.length === 1)
		said.push(`The plan ${listWords(without)} holds estimates only: what happened can’t be compared.`);
	return said;
}

/** Whether a plan holds estimates only. */
export function lacksRun(reading: Reading): boolean {
	return reading.symptoms.some(({ id }) => id === 'no-runtime-figures');
}

function sharesTable(pairs: Compared['pairs']): boolean {
	const reads = pairs.filter(({ before, after }) => (before ?? after)?.operator.relation !== null);
	return reads.length === 0 || reads.some(({ before, after }) => before !== null && after !== null);
}

function hasChanged({ timeMs, temporaryBytes, symptomsGone, symptomsNew, changed }: Compared): boolean {
	return (
		changed > 0 ||
		symptomsGone.length > 0 ||
		symptomsNew.length > 0 ||
		differs(...timeMs, LEAST_MS) ||
		differs(...temporaryBytes)
	);
}

function sayUnchanged({ timeMs: [was, is] }: Compared): string {
	if (was === null || is === null) return 'Nothing changed.';
	const times =
		was === is ? `${formatMs(is)} before and after` : joinFigures(formatMs(was), 'and', formatMs(is));
	return `Nothing changed: ${times}.`;
}

function sayTime({ timeMs: [was, is] }: Compared): string[] {
	if (was === null || is === null) return [];
	if (differs(was, is, LEAST_MS)) return [`Time ${sayMove(was, is, formatMs)}.`];
	return [`Time stayed about the same (${joinFigures(formatMs(was), 'and', formatMs(is))}).`];
}

/** Temporary files where no sentence on an operator tells of them: in logs, and where no symptom names who wrote them. */
function sayFiles({ temporaryBytes: [was, is], before, pairs }: Compared): string[] {
	if (was === null || is === null) return [];
	if (pairs.some(({ spilledBefore, spilledAfter }) => spilledBefore !== null || spilledAfter !== null))
		return [];
	if (differs(was, is))
		return [
			is === 0
				? `The ${formatBytes(was)} of temporary files are gone.`
				: `Temporary files ${sayMove(was, is, formatBytes)}.`
		];
	return before.plan === null
		? [
				is === 0
					? 'No temporary files before or after.'
					: `Temporary files stayed the same (${formatBytes(is)}).`
			]
		: [];
}

/** "Set: work_mem 40MB instead of 4MB."; null: nothing is known to have changed. */
function saySettings({ before, after }: Compared): string | null {
	const [was, is] = [before.plan?.settings ?? {}, after.plan?.settings ?? {}];
	// A plan without the option that prints settings holds none: that is no difference.
	if (Object.keys(was).length === 0 || Object.keys(is).length === 0) return null;
	const changes = [...new Set([...Object.keys(was), ...Object.keys(is)])].flatMap((name) => {
		const [old, now] = [was[name], is[name]];
		if (old === now) return [];
		if (old !== undefined && now !== undefined) return `${name} ${now} instead of ${old}`;
		if (!MEMORY_SETTINGS.includes(name)) return [];
		return now === undefined ? `${name} no longer ${old ?? ''}` : `${name} ${now}`;
	});
	return changes.length === 0 ? null : `Set: ${changes.slice(0, MOST_SETTINGS).join(', ')}.`;
}

function saySymptoms({ symptomsGone, symptomsNew }: Compared): string[] {
	const untold = (ids: readonly SymptomId[]) =>
		listWords(
			ids.filter((id) => !TOLD.includes(id)).map((id) => id.replaceAll('-', ' ').replace('jit', 'JIT'))
		);
	const [gone, begun] = [untold(symptomsGone), untold(symptomsNew)];
	return [...(gone === '' ? [] : [`No longer shown: ${gone}.`]), ...(begun === '' ? [] : [`New: ${begun}.`])];
}
