import type { Candidate, Likeness, Question, RankedPrecedent, Rarity, ReasonKind } from './precedent';
import { REASON_KINDS } from './precedent';
import { compareCauses } from './parts/cause';
import { compareSettings } from './parts/setting';
import { compareStatements } from './parts/statement';
import { compareSymptoms } from './parts/symptoms';
import { compareByVerdict } from './parts/verdict';
import { compareWords } from './parts/words';
import {
	ONLY_TOLD_CAUSES,
	ONLY_TOLD_SYMPTOMS,
	PART_WEIGHTS,
	REFUSED_KEEPS,
	SAME_STATEMENT_COUNTS,
	TIE
} from './weights';

export interface RankOptions {
	limit: number;
	/** The respects to rank by, with their weights; all of them unless told otherwise (the bench ranks by one alone). */
	weights?: Readonly<Partial<Record<ReasonKind, number>>>;
}

/**
 * The candidates that resemble the question, most similar first, at most `limit`. The score is the weighted
 * mean of the likeness in each respect, over the respects that the question can be compared on; where the
 * candidate lacks one (no evidence, say) it counts as unlike. Candidates without any likeness are left out.
 */
export function rankPrecedents(
	question: Question,
	candidates: readonly Candidate[],
	rarity: Rarity,
	options: RankOptions
): RankedPrecedent[] {
	const weights = weighParts(question, options.weights ?? PART_WEIGHTS);
	const asked = respectsOf(question);
	return candidates
		.map((candidate) => scoreCandidate(question, candidate, rarity, weights, asked))
		.filter((ranked) => isAlike(ranked, weights))
		.sort(compareRanked)
		.slice(0, options.limit);
}

type Weights = NonNullable<RankOptions['weights']>;

/** What the parts count for this question: symptoms and causes that only its words tell of count less. */
function weighParts({ profile }: Question, weights: Weights): Weights {
	const isShown = profile.symptoms.some((symptom) => !symptom.told);
	const isGiven = profile.causes.length > 0 || profile.confirmedCause !== null;
	return {
		...weights,
		symptoms: (weights.symptoms ?? 0) * (isShown ? 1 : ONLY_TOLD_SYMPTOMS),
		cause: (weights.cause ?? 0) * (isGiven ? 1 : ONLY_TOLD_CAUSES)
	};
}

/** The respects on which the question can be compared with anything. */
function respectsOf({ profile, bestBm25 }: Question): ReadonlySet<ReasonKind> {
	const respects = new Set<ReasonKind>();
	if (bestBm25 > 0) respects.add('words');
	if (profile.symptoms.length > 0) respects.add('symptoms');
	if (profile.causes.length + profile.toldCauses.length > 0 || profile.confirmedCause !== null)
		respects.add('cause');
	if (profile.fingerprints.length + profile.relations.length + profile.traits.length > 0)
		respects.add('statement');
	if (compareSettings(profile, profile) !== null) respects.add('setting');
	return respects;
}

function scoreCandidate(
	question: Question,
	candidate: Candidate,
	rarity: Rarity,
	weights: Weights,
	asked: ReadonlySet<ReasonKind>
): RankedPrecedent {
	const likeness = compareAll(question, candidate, rarity);
	const respects = REASON_KINDS.filter(
		(kind) => asked.has(kind) || (kind === 'verdict' && likeness.verdict !== null)
	);
	const weightOf = (kind: ReasonKind) =>
		(weights[kind] ?? 0) * (kind === 'statement' && likeness.statement === 1 ? SAME_STATEMENT_COUNTS : 1);
	const all = respects.reduce((sum, kind) => sum + weightOf(kind), 0);
	const kept = candidate.verdict === 'not' ? REFUSED_KEEPS : 1;
	const contributions = { words: 0, symptoms: 0, cause: 0, statement: 0, setting: 0, verdict: 0 };
	if (all > 0) {
		for (const kind of respects) contributions[kind] = (kept * weightOf(kind) * (likeness[kind] ?? 0)) / all;
	}
	const score = REASON_KINDS.reduce((sum, kind) => sum + contributions[kind], 0);
	return { candidate, score, likeness, contributions };
}

function compareAll({ profile, bestBm25 }: Question, candidate: Candidate, rarity: Rarity): Likeness {
	const other = candidate.profile;
	return {
		words: compareWords(candidate.bm25, bestBm25),
		symptoms: compareSymptoms(profile.symptoms, other.symptoms, rarity),
		cause: compareCauses(profile, other, rarity),
		statement: compareStatements(profile, other, rarity),
		setting: compareSettings(profile, other),
		verdict: compareByVerdict(candidate.verdict)
	};
}

/** The same engine or service alone makes no precedent, unless it is all that counts. */
function isAlike(ranked: RankedPrecedent, weights: Weights): boolean {
	const counting = REASON_KINDS.filter((kind) => kind !== 'setting' && (weights[kind] ?? 0) > 0);
	const telling = counting.length > 0 ? counting : REASON_KINDS;
	return telling.some((kind) => ranked.contributions[kind] > 0);
}

/** Higher score first; in a tie the one whose outcome is known, then the newer one, then the higher number. */
function compareRanked(one: RankedPrecedent, other: RankedPrecedent): number {
	const apart = Math.round(other.score / TIE) - Math.round(one.score / TIE);
	if (apart !== 0) return apart;
	const outcome = Number(other.candidate.hasOutcome) - Number(one.candidate.hasOutcome);
	if (outcome !== 0) return outcome;
	const oneAt = one.candidate.profile.startedAt ?? '';
	const otherAt = other.candidate.profile.startedAt ?? '';
	if (oneAt !== otherAt) return oneAt < otherAt ? 1 : -1;
	return other.candidate.number - one.candidate.number;
}
