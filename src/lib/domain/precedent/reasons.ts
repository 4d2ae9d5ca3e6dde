import { ENGINE_NAMES } from '../reading/engine-names';
import { causeFeature, relationFeature, symptomFeature } from './features';
import type {
	PrecedentProfile,
	PrecedentReason,
	ProfileSymptom,
	RankedPrecedent,
	Rarity,
	ReasonKind
} from './precedent';
import { REASON_KINDS } from './precedent';
import { findWords, findNames } from './tokens';
import { stem } from './stem';
import { CONCEPTS } from './trade-words';
import { SMALLEST_SHARE } from './weights';

/** What the sentences are made from beside the profiles. */
export interface Context {
	/** When the one asked about began. */
	at: string;
	/** The terms that were asked for, rarest first. */
	terms: readonly string[];
	askedText: string;
	/** Text of the precedent. */
	text: string;
	rarity: Rarity;
}

const MOST_SHOWN = 3;
const MOST_WORDS = 5;
const SHARE_DECIMALS = 1000;
const DAY_MS = 86_400_000;

/** Why an incident is a precedent, the weightiest reason first; the shares add up to 1. */
export function explain(
	asked: PrecedentProfile,
	ranked: RankedPrecedent,
	context: Context
): PrecedentReason[] {
	const told = REASON_KINDS.map((kind) => ({
		kind,
		contribution: ranked.contributions[kind],
		text: ranked.contributions[kind] > 0 ? SENTENCES[kind](asked, ranked, context) : null
	}));
	const telling = told.filter((reason): reason is typeof reason & { text: string } => reason.text !== null);
	const all = telling.reduce((sum, reason) => sum + reason.contribution, 0);
	const shown = telling
		.filter((reason) => reason.contribution >= all * SMALLEST_SHARE)
		.sort((one, other) => other.contribution - one.contribution);
	return shareOut(shown);
}

/** Rounds shares so that they add up to 1; what rounding leaves over goes to the weightiest. */
function shareOut(
	reasons: readonly { kind: ReasonKind; text: string; contribution: number }[]
): PrecedentReason[] {
	const all = reasons.reduce((sum, reason) => sum + reason.contribution, 0);
	const shares = reasons.map((reason) => Math.round((reason.contribution / all) * SHARE_DECIMALS));
	const left = SHARE_DECIMALS - shares.reduce((sum, share) => sum + share, 0);
	return reasons.map(({ kind, text }, index) => ({
		kind,
		text,
		share: ((shares[index] ?? 0) + (index === 0 ? left : 0)) / SHARE_DECIMALS
	}));
}

type Sentence = (asked: PrecedentProfile, ranked: RankedPrecedent, context: Context) => string | null;

const SENTENCES: Record<ReasonKind, Sentence> = {
	words: (_asked, { candidate }, context) => {
		const shared = sharedWords(context, candidate.profile.ideas);
		return shared.length === 0 ? null : `words: ${shared.join(', ')}`;
	},
	symptoms: (asked, { candidate }, { rarity }) => {
		const pairs = asked.symptoms
			.map((one) => ({ one, other: candidate.profile.symptoms.find((symptom) => symptom.id === one.id) }))
			.filter((pair): pair is { one: ProfileSymptom; other: ProfileSymptom } => pair.other !== undefined)
			.sort((a, b) => rarity(symptomFeature(b.one.id)) - rarity(symptomFeature(a.one.id)))
			.slice(0, MOST_SHOWN);
		return pairs.length === 0
			? null
			: `both: ${pairs.map(({ one, other }) => describePair(one, other)).join('; ')}`;
	},
	cause: (asked, { candidate: { profile } }, { rarity }) => {
		const confirmed = profile.confirmedCause;
		const shared = (id: string) =>
			asked.confirmedCause === id || asked.causes.some((cause) => cause.id === id);
		if (confirmed !== null && shared(confirmed))
			return `its confirmed cause is likely here: ${toWords(confirmed)}`;
		const both = profile.causes
			.filter((cause) => shared(cause.id))
			.sort((a, b) => b.confidence * rarity(causeFeature(b.id)) - a.confidence * rarity(causeFeature(a.id)))
			.slice(0, 2);
		return both.length === 0
			? null
			: `likely cause of both: ${both.map((cause) => toWords(cause.id)).join(' or ')}`;
	},
	statement: (asked, { candidate: { profile } }, { at, rarity }) => {
		if (asked.fingerprints.some((fingerprint) => profile.fingerprints.includes(fingerprint))) {
			return ['same statement', describeDistance(profile.startedAt, at)]
				.filter((part) => part !== null)
				.join(', ');
		}
		const shape = asked.shapes.find((one) => profile.shapes.includes(one));
		const relations = asked.relations
			.filter((relation) => profile.relations.includes(relation))
			.sort((one, other) => rarity(relationFeature(other)) - rarity(relationFeature(one)))
			.slice(0, MOST_SHOWN);
		const parts = [
			relations.length === 0 ? null : `same tables: ${relations.join(', ')}`,
			shape === undefined ? null : `same path: ${shape.split('>').map(toWords).join(' → ')}`
		].filter((part) => part !== null);
		return parts.length === 0 ? 'plans of a similar shape' : parts.join('; ');
	},
	setting: (asked, { candidate: { profile } }) => {
		const same = (one: string | null, other: string | null) =>
			one !== null && one !== '' && one.toLowerCase() === other?.toLowerCase();
		const parts = [
			same(asked.service, profile.service) ? `service ${profile.service}` : null,
			profile.engine !== null && same(asked.engine, profile.engine) ? ENGINE_NAMES[profile.engine] : null,
			same(asked.database, profile.database) ? `database ${profile.database}` : null
		].filter((part) => part !== null);
		return parts.length === 0 ? null : `same ${parts.join(', ')}`;
	},
	verdict: (_asked, { candidate: { verdict } }) =>
		verdict === 'same'
			? 'somebody confirmed: the same fault'
			: verdict === 'related'
				? 'somebody confirmed: related'
				: null
};

/** "hash spill, grown", "row underestimate at a seq scan of invoice_line". */
function describePair(one: ProfileSymptom, other: ProfileSymptom): string {
	const course = one.course !== null && one.course === other.course ? `, ${one.course}` : '';
	const place =
		one.operator === null || one.operator !== other.operator
			? ''
			: one.relation !== null && one.relation === other.relation
				? ` at ${withArticle(toWords(one.operator))} of ${one.relation}`
				: ` at ${withArticle(toWords(one.operator))}`;
	return `${toWords(one.id)}${course}${course !== '' && place !== '' ? ',' : ''}${place}`;
}

function withArticle(noun: string): string {
	return `${/^[aeiou]/.test(noun) ? 'an' : 'a'} ${noun}`;
}

function toWords(id: string): string {
	return id.replaceAll('-', ' ');
}

/** "41 days ago", "12 days later", "the same day"; null: the precedent's start isn't known. */
function describeDistance(startedAt: string | null, at: string): string | null {
	if (startedAt === null) return null;
	const days = Math.round((Date.parse(at) - Date.parse(startedAt)) / DAY_MS);
	if (Number.isNaN(days)) return null;
	if (days === 0) return 'the same day';
	const count = Math.abs(days) === 1 ? '1 day' : `${Math.abs(days)} days`;
	return days > 0 ? `${count} ago` : `${count} later`;
}

/** The words that both texts hold, as the one asked about has them, rarest first; ideas in their own words. */
function sharedWords({ terms, askedText, text }: Context, ideas: readonly string[]): string[] {
	const present = new Map<string, string>();
	for (const word of findWords(askedText))
		if (!present.has(stem(word.text))) present.set(stem(word.text), word.text);
	for (const name of findNames(askedText)) present.set(name, name);
	const held = new Set([...findWords(text).map((word) => stem(word.text)), ...findNames(text)]);
	const shared: string[] = [];
	for (const term of terms) {
		const idea = ideas.includes(term) ? CONCEPTS.find((concept) => concept.term === term)?.title : undefined;
		const word = idea ?? (held.has(term) ? present.get(term) : undefined);
		if (word !== undefined && !shared.includes(word)) shared.push(word);
	}
	return shared.slice(0, MOST_WORDS);
}
