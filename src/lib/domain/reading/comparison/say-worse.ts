import { formatBytes } from '../../sizing/units';
import { listWords, toSentence, type Compared, type ComparedPair } from './compared';
import { differs, sayBytesInstead } from './differences';
import { followEstimate, sayEstimate } from './estimates';
import { nameIn } from './operator-words';

/** Words of the sentences that tell of harm, for whoever sets them off. */
export const HARM = /\b(still does?|still overflows?|overflows? now|wrong now|still wrong|rose from)\b/;

/** Overflows named one by one; more are counted together. */
const MOST_NAMED = 3;

/** What still overflows, what does now, which estimate went wrong: a sentence each. `afterCure`: the sentence before told of an overflow that ended. */
export function sayWorse(compared: Compared, afterCure: boolean): string[] {
	return [...sayStill(compared, afterCure), ...sayNew(compared), ...sayWrong(compared)];
}

function sayStill({ after, pairs }: Compared, afterCure: boolean): string[] {
	if (after.plan === null) return [];
	const name = nameIn(after.plan.root);
	const still = pairs.filter((pair) => pair.spilledBefore !== null && pair.spilledAfter !== null);
	if (still.length > MOST_NAMED) return [`${still.length} operators still overflow.`];
	return still.flatMap((pair, index) => {
		if (pair.after === null) return [];
		const verb = afterCure && index === 0 ? 'still does' : 'still overflows';
		return toSentence(`${name(pair.after.operator)} ${verb}${sayBytes(pair)}`);
	});
}

/** ", 27 MB instead of 55", ", 55 MB as before"; empty where the bytes are not known. */
function sayBytes({ spilledBefore, spilledAfter }: ComparedPair): string {
	const [was, is] = [spilledBefore?.bytes ?? null, spilledAfter?.bytes ?? null];
	if (is === null) return '';
	if (was === null) return `, ${formatBytes(is)}`;
	if (differs(was, is)) return `, ${sayBytesInstead(was, is)}`;
	return `, ${formatBytes(is)} ${formatBytes(was) === formatBytes(is) ? 'as' : 'about as'} before`;
}

function sayNew({ after, pairs }: Compared): string[] {
	if (after.plan === null) return [];
	const name = nameIn(after.plan.root);
	const began = pairs.flatMap((pair) =>
		pair.spilledBefore === null && pair.spilledAfter !== null && pair.after !== null
			? [{ name: name(pair.after.operator), bytes: pair.spilledAfter.bytes }]
			: []
	);
	if (began.length === 0) return [];
	const bytes = began.reduce((sum, each) => sum + (each.bytes ?? 0), 0);
	return [
		toSentence(
			`${listWords(began.slice(0, MOST_NAMED).map((each) => each.name))} ${began.length === 1 ? 'overflows' : 'overflow'} now${bytes > 0 ? `, ${formatBytes(bytes)}` : ''}`
		)
	];
}

/** The lowest operator of a plan whose estimate is wrong: the others above it are wrong for its sake. */
function sayWrong({ after, pairs }: Compared): string[] {
	if (after.plan === null) return [];
	const name = nameIn(after.plan.root);
	const [worst] = pairs
		.flatMap((pair) => {
			const course = followEstimate(pair);
			return pair.after !== null && (course === 'wrong-now' || course === 'still-wrong')
				? [{ is: pair.after.operator, course }]
				: [];
		})
		.toSorted(
			(one, other) =>
				other.is.path.split('.').length - one.is.path.split('.').length ||
				(other.is.qError ?? 0) - (one.is.qError ?? 0)
		);
	if (worst === undefined) return [];
	const { is, course } = worst;
	return [
		`The estimate of ${name(is)} is ${course === 'wrong-now' ? 'wrong now' : 'still wrong'} (${sayEstimate(is)}).`
	];
}
