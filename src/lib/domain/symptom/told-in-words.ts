import type { Symptom } from '../reading/reading';
import type { SymptomId } from './symptom';

/** Light: words are no evidence. */
const TOLD_WEIGHT = 0.1;

/** How people name a symptom at night, by what they most likely saw. Matched without regard to case. */
const PHRASES: readonly [SymptomId, RegExp][] = [
	[
		'hash-spill',
		/\bhash(?:es|ed)?\b[^.;\n]{0,60}\b(?:spill\w*|to disk|on disk|overflow\w*|temp(?:orary)? files?)\b/
	],
	[
		'hash-spill',
		/\bbatches[:=]?\s+(?:[2-9]|\d{2,})\b|\b(?:[2-9]|\d{2,})\s+batches\b|\bbatches (?:go|went|grew) from\b/
	],
	[
		'sort-spill',
		/\bexternal (?:merge|sort)\b|\bsort(?:s|ed|ing)?\b[^.;\n]{0,40}\b(?:spill\w*|to disk|on disk)\b/
	],
	['sort-spill', /\bmerge passes\b|\bsort passes\b/],
	[
		'aggregate-spill',
		/\b(?:hash ?agg(?:regate)?|group(?:ing)?)\b[^.;\n]{0,60}\b(?:spill\w*|to disk|on disk|disk usage)\b/
	],
	[
		'materialize-spill',
		/\b(?:cte|with query|materiali[sz]ed?)\b[^.;\n]{0,60}\b(?:spill\w*|to disk|on disk|temp)\b/
	],
	['temp-table-on-disk', /\btmp[ _]disk[ _]tables?\b|\btemp(?:orary)? tables?\b[^.;\n]{0,30}\bon disk\b/],
	['hash-spill', /\b(?:spill(?:ed|s|ing)?|temp(?:orary)? files?|temp space|temp bytes)\b/],
	[
		'row-underestimate',
		/\b(?:estimate[sd]?|expect(?:ed|s)?|thinks?|thought|planned|guess(?:ed|es)?)\b[^.;\n]{0,40}?\b(?:one|a hundred|under a thousand|\d[\d,.]*k?)\b[^.;\n]{0,40}\b(?:got|came|actual(?:ly)?|real(?:ly)?|found|there are|in truth)\b/
	],
	[
		'row-underestimate',
		/\b(?:row )?(?:under-?estimat\w+|mis-?estimat\w+)\b|\bestimate\w* (?:is|was|are|were) (?:way |far )?(?:off|wrong|poor|too low)\b/
	],
	['row-overestimate', /\bover-?estimat\w+\b|\bestimate\w* (?:is|was) (?:way |far )?(?:over|too high)\b/],
	['skewed-hash', /\bskew(?:ed)?\b|\bsame (?:key|value)\b[^.;\n]{0,40}\b(?:most|half|two thirds|all)\b/],
	[
		'repeated-inner-scan',
		/\b(?:inner (?:side|scan|index scan)|nested loops?|subplan)\b[^.;\n]{0,80}\b(?:times|executed|loops|again and again|every row)\b/
	],
	[
		'filter-discards-most',
		/\brows removed by filter\b|\b(?:rows? (?:removed|thrown away|discarded))\b|\bscans? everything\b/
	],
	[
		'function-on-column',
		/\b(?:function|cast|lower|to_char|split_part)\b[^.;\n]{0,40}\b(?:index|column|where clause)\b/
	],
	['bitmap-lossy', /\blossy\b/],
	[
		'missing-parallel-workers',
		/\bworkers? (?:launched|started)?:? ?(?:0|none|missing)\b|\blaunched (?:0|none|only)\b|\bone came\b/
	],
	['heap-fetches-high', /\bheap fetches\b/],
	['cold-reads', /\bcold cache\b|\bcache (?:is|was) cold\b|\bread from disk\b/],
	[
		'jit-dominates',
		/\bjit\b[^.;\n]{0,60}\b(?:compil\w+|half|most|time|runtime|overhead|longer)\b|\bspends?\b[^.;\n]{0,40}\bcompiling\b/
	],
	['deep-offset', /\boffset\b[^.;\n]{0,12}\d{4,}|\bdeep (?:offset|pages?|pagination)\b/],
	['generic-plan', /\bgeneric plan\b|\bprepared statement\b[^.;\n]{0,60}\bplan\b/]
];

/** Words just before a phrase that turn it round: "nothing spilled", "no temp files at all". */
const NEGATION =
	/\b(?:no|not|nothing|never|none|without|neither|nor|isn't|wasn't|doesn't|didn't|don't|zero)\b[^.;:,!?\n]{0,24}$/;
/** "Heap Fetches: 0", "no lossy blocks". */
const NOTHING_AFTER = /^\s*(?:[:=]\s*0\b|:\s*none\b)/;

/**
 * Symptoms that a text names in words, one finding for each, with the words that name it. They are what somebody
 * remembers: shown only where no evidence shows the symptom itself, and never counted as evidence.
 */
export function findToldInWords(text: string): Symptom[] {
	const lower = text.toLowerCase();
	const told = new Map<SymptomId, string>();
	for (const [id, pattern] of PHRASES) {
		if (told.has(id)) continue;
		const words = findAffirmed(lower, pattern);
		if (words === null) continue;
		// "Spilled" alone is told as a hash spill only where no other spill was named.
		if (id === 'hash-spill' && /^(?:spill|temp)/.test(words) && [...told.keys()].some(isSpill)) continue;
		told.set(id, words);
	}
	return [...told].map(([symptom, words]) => ({
		id: 'told-in-words',
		operator: null,
		weight: TOLD_WEIGHT,
		figures: { symptom, words },
		summary: `The text says “${words}”; no evidence shows it yet.`
	}));
}

function isSpill(id: SymptomId): boolean {
	return id.endsWith('-spill') || id === 'temp-table-on-disk';
}

function findAffirmed(text: string, pattern: RegExp): string | null {
	for (const match of text.matchAll(new RegExp(pattern, 'g'))) {
		const before = text.slice(Math.max(0, match.index - 40), match.index);
		const after = text.slice(match.index + match[0].length);
		if (!NEGATION.test(before) && !NOTHING_AFTER.test(after)) return match[0].replace(/\s+/g, ' ').trim();
	}
	return null;
}
