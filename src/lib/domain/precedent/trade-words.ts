/**
 * What people who keep databases running call one thing by several names. Common practice of the trade, no
 * source. Two small tables: words that mean the same whatever surrounds them, and turns of phrase that speak
 * of one idea. The second kind adds a term of its own (`~spill`), so that "writes temp files", "goes to disk"
 * and "external merge" meet, beside the words themselves.
 */

/** Word as met or as stemmed → the stem that it counts as. */
export const SAME_WORD: ReadonlyMap<string, string> = new Map(
	Object.entries({
		temp: 'temporary',
		tmp: 'temporary',
		stat: 'statistic',
		stats: 'statistic',
		analyse: 'analyz',
		analys: 'analyz',
		analysed: 'analyz',
		analysing: 'analyz',
		analysis: 'analyz',
		indices: 'index',
		indexes: 'index',
		mem: 'memory',
		db: 'database',
		config: 'configuration',
		cfg: 'configuration',
		params: 'parameter',
		param: 'parameter',
		spilt: 'spill',
		sequential: 'seq',
		postgres: 'postgresql',
		pg: 'postgresql',
		wrote: 'write',
		written: 'write',
		ran: 'run',
		read: 'read',
		chose: 'choos',
		chosen: 'choos',
		grew: 'grow',
		grown: 'grow'
	})
);

export interface Concept {
	/** The term that it adds; no text of a person can hold it. */
	term: string;
	/** In words, for the reasons shown. */
	title: string;
	/** Any of these in one clause means it. */
	says: RegExp;
	/** True: a "no" before it is part of what it says ("no index"), not a denial. */
	ownsNegation?: true;
}

const concept = (name: string, title: string, says: RegExp, ownsNegation?: true): Concept => ({
	term: `~${name}`,
	title,
	says,
	...(ownsNegation ? { ownsNegation } : {})
});

export const CONCEPTS: readonly Concept[] = [
	concept(
		'spill',
		'temporary files',
		/\btemp(?:orary)?[ -](?:files?|space|bytes?|blocks?|volume|written|usage)\b|\bspill|\bspilt\b|\b(?:to|on|onto|hits?) (?:the )?disk\b|\bexternal (?:merge|sort)\b|\bdisk usage\b|\btmpdir\b|\bpgsql_tmp\b/
	),
	concept(
		'memory-setting',
		'memory setting',
		/\b(?:work_mem|sort_buffer_size|join_buffer_size|tmp_(?:memory_)?table_size|max_heap_table_size|hash_mem_multiplier|memory grant)\b|\b(?:memory|buffer) (?:setting|limit|allowance|budget)|\b(?:more|not enough|short(?:age)? of|out of|too little) (?:work |hash )?memory\b|\bfit(?:s|ted)? (?:in|into) (?:memory|\d)/
	),
	concept(
		'hash-batches',
		'hash batches',
		/\bbatch(?:es)?:? (?:from )?\d|\b\d+ batches\b|\bhash (?:table|buckets|batches|join)|\bhash(?:es|ed)\b.*\b(?:side|table|batches)\b|\bhashed to disk\b/
	),
	concept(
		'build-side',
		'side that is hashed',
		/\bbuild side\b|\bwrong (?:way round|side|table)\b|\bwhich side\b|\bswap(?:ped)? (?:the )?sides\b|\b(?:big|bigger|large|larger|huge)\*? (?:table|side|one|input)\b.*\bhash|\bhash(?:es|ed)?\b.*\b(?:big|bigger|large|larger|huge) (?:table|side|one|input)\b|\bflips? the (?:join )?sides?\b|\bprobe\b/
	),
	concept(
		'skew',
		'uneven values',
		/\bskew|\bsame (?:key|value)\b|\bone (?:value|key)\b.*\b(?:rows|percent|%|third|half)|\bhot (?:key|value)\b|\bheavy (?:value|key|hitter)|\b(?:single|equal|null) keys?\b|\bsame hash\b|\bhash to the same\b|\bplaceholder\b|\bumbrella\b|\bdummy (?:value|key|row|record)|\bmost rows (?:carry|have|hold)|\bevery row (?:carries|has|holds) the same|\b(?:keeps? |gives up |never )splitting|\bdoubl(?:es|ed|ing) (?:and|again|the (?:number|batches))|\bcan(?:no|')?t (?:be )?split/
	),
	concept(
		'sort',
		'sort',
		/\bsort(?:s|ed|ing)?\b|\bfilesort\b|\border by\b|\bmerge[_ ]passes\b|\bquicksort\b/i
	),
	concept(
		'merge-passes',
		'merge passes of a sort',
		/\b(?:merge|sort)[_ ]passes\b|\bexternal (?:merge|sort)\b/
	),
	concept('aggregate', 'aggregate', /\bhash ?agg(?:regate)?\b|\bgroup(?:s|ed|ing)?\b|\baggregat/),
	concept(
		'materialize',
		'stored intermediate result',
		/\bcte\b|\bmateriali[sz]e|\btuplestore\b|\bwith clause\b|\bwindow(?:agg| function)?\b/
	),
	concept(
		'temp-table',
		'internal temporary table',
		/\b(?:temp|temporary|tmp|memory|in-memory) tables?\b|\btmp_(?:disk_)?tables?/
	),
	concept(
		'estimate-off',
		'estimate off',
		/\b(?:under|over)-?\s?estimat|\bmis-?estimat|\b(?:est|estimated?|estimates|expect(?:s|ed)|planned|plan rows|guess(?:es|ed)?|thinks?|thought|believ(?:es|ed)|assum(?:es|ed)|planner says)\b[^.;]{0,60}?\b(?:\d[\d,.]*k?|one|two|ten|eleven|hundred|thousand)\b[^.]{0,60}?\b(?:actual(?:ly)?|really|reality|real|got|gets|came|come|comes|but|really|truth|found|there are|act|it is|it's)\b|\bfactor (?:of )?\d|\btimes (?:too|off)\b|\bx off\b|\bestimat\w* (?:is|was|are|were) (?:poor|wrong|off|bad)|\bguess of (?:one|\d)/
	),
	concept(
		'estimate-right',
		'estimate right',
		/\b(?:estimat\w*|guess\w*|row (?:numbers|counts?)|cardinalit\w+|rows)\b[^.;]{0,25}\b(?:exact\w*|right|spot on|bang on|fine|ok|okay|correct|equal\w*|good enough|close|accurate|perfect|match(?:es)?)\b|\bto the row\b|\bwithin (?:a|one|two|\d) ?(?:percent|%)|\bguess = reality\b|\brows estimated right\b|\bno estimate trouble\b|\bestimated? [~≈]?(?:about |around )?\d+[^.;]{0,12}\b(?:got|vs|and got)\b/
	),
	concept(
		'statistics',
		'statistics',
		/\banaly[sz]e[ds]?\b|\b(?:stale|old|out ?dated|frozen|missing|wrong|fresh|no|planner) statistics\b|\bauto-?analy[sz]e\b|\bstats?\b|\bstatistics\b|\bn_distinct\b/
	),
	concept(
		'stale-statistics',
		'stale statistics',
		/\b(?:stale|old|outdated|out of date|frozen) (?:stat|planner)|\blast analy[sz]e|\bnot (?:been )?analy[sz]ed\b|\bnever analy[sz]ed\b|\bbefore any statistics\b|\banaly[sz]e\b[^.]{0,40}\b(?:after|last step|part of|by hand|then|came back|at the end)\b|\bstats_auto_recalc\b|\b(?:ran|run) analy[sz]e\b/
	),
	concept(
		'bulk-load',
		'bulk load',
		/\bbulk\b|\b(?:after|since|during) the (?:\w+ )?(?:load|import|migration)\b|\bloader\b[^.]{0,40}\b(?:wrote|writes|finished|rows|lines)|\bload(?:ed|ing)? \d/
	),
	concept(
		'correlated',
		'columns that depend on each other',
		/\bcorrelat|\bindependent\b|\bfunctional(?:ly)? dependen|\bdependen(?:t columns|cies)\b|\bdepend on each other\b|\bcreate statistics\b|\bextended statistics\b|\bmcv\b|\bndistinct\b|\bfollows? from\b|\bmultiplied as (?:though|if)\b|\bsay the same\b/
	),
	concept(
		'distinct-count',
		'number of distinct values',
		/\bn_?distinct\b|\bdistinct (?:count|values|number)|\bnumber of (?:groups|distinct)|\bhow many (?:groups|different)|\bgroups\b[^.]{0,30}\b(?:expect|estimat|planned|came|real)/
	),
	concept(
		'missing-index',
		'missing index',
		/\bno (?:\w+ )?(?:index|indexes|key)\b|\bmissing[ -]?index|\bindex (?:is |was )?missing\b|\bwithout (?:an?|any) (?:index|key)\b|\bcreate index\b|\badd(?:ed)? (?:an? )?(?:index|key)\b|\badd key\b|\bindex on \w+\s?\(|\bkey on \w+\s?\(|\bhad no index\b|\bindexes did not\b/,
		true
	),
	concept(
		'reads-everything',
		'reads everything',
		/\bseq(?:uential)? scans?\b|\bfull (?:table )?scans?\b|\b(?:scans|reads|reading|read) (?:everything|all|the (?:whole|complete|entire))\b|\bremoved by filter\b|\bfilter(?:ed)? (?:throws|removed|out|away)|\bthrown? away\b|\brows removed\b/
	),
	concept(
		'wrapped-column',
		'column inside a function or cast',
		/\b(?:lower|upper|to_char|date_trunc|trim|substr(?:ing)?|coalesce|split_part|left|right|date|year|cast|convert)\(|\bfunction (?:on|around|over|call)|\bfunctional index\b|\bexpression (?:index|statistics)|\b(?:implicit )?(?:cast|conversion)\b|\bcase-insensitive\b|\bsargable\b|\bformatted string\b|\bbare column\b|\bbound as\b|\bas numeric\b/
	),
	concept(
		'nested-loop',
		'nested loop',
		/\bnested loops?\b|\bloops ?=|\binner (?:side|scan|index|seq)|\bsub-?plan\b|\bcorrelated sub|\b(?:for|once per) (?:each|every)\b|\bone by one\b|\bquadratic\b|\bpairs\b|\btimes\)|\bper (?:outer )?row\b/
	),
	concept(
		'join-buffer',
		'join buffer',
		/\bjoin buffer|\bjoin_(?:buffer|cache)|\bblock[ -]n(?:ested|l)|\bbnlh?\b|\bfull[_ ]join\b|\bbillions? of\b|\bmillion (?:pairs|comparisons)/
	),
	concept('lossy-bitmap', 'lossy bitmap', /\bloss(?:y|iness)\b|\brecheck|\bheap blocks\b/),
	concept(
		'parallel-workers',
		'parallel workers',
		/\bworkers? (?:planned|launched|wished|started)|\bparallel (?:workers?|query|plan)|\bmax_parallel_\w+|\blaunched\b/i
	),
	concept(
		'visibility',
		'visibility map',
		/\bheap fetches\b|\bvisibility map\b|\bindex[ -]only\b|\ball-visible\b|\bnot (?:been )?vacuumed\b/
	),
	concept(
		'bloat',
		'bloat',
		/\bbloat|\bdead (?:rows|tuples|ones|versions|space)\b|\bdead_tup|\brelpages\b|\b(?:space|pages)\b[^.]{0,30}\b(?:never (?:returned|given back|reused)|stayed allocated)|\bfree space inside\b|\bper page\b|\bdeleted (?:nearly |almost )?(?:everything|all|most|\d\d ?%)|\bfillfactor\b|\bvacuum full\b|\brepack\b|\bhot updates?\b|\brows? per page\b|\bpages?\b[^.]{0,30}\b(?:empty|nearly empty)|\bvacuum (?:can'?t|never|cannot|was|had)/
	),
	concept(
		'jit',
		'just-in-time compilation',
		/\bjit\b|\bjit_\w+|\bjust-in-time\b|\binlining\b|\bcompil(?:es|ing|ation)\b/
	),
	concept(
		'offset',
		'deep offset',
		/\boffset\b|\bkeyset\b|\bpaginat|\bpaging\b|\bpages? of \d+\b|\b(?:page|pages) \d{3,}\b|\bpage by page\b|\bper page\b|\bskipped rows\b/
	),
	concept(
		'generic-plan',
		'generic plan',
		/\bgeneric plans?\b|\bcustom plans?\b|\bplan_cache_mode\b|\bprepared (?:statement|query)|\$\d\b|\bforce_(?:generic|custom)_plan\b|\bbind (?:variable|parameter)/
	),
	concept(
		'cold-cache',
		'cold cache',
		/\bcold\b|\bcache (?:is|was) empty\b|\bempty cache\b|\bfirst (?:run|call|reader|report|one to touch)\b|\bprewarm|\bafter (?:the |a )?(?:restart|reboot|switch-?over|failover)\b|\bshared read\b|\bnot a single hit\b|\bread from disk\b/
	),
	concept(
		'forced-index',
		'forced or wrong index',
		/\bforce index\b|\bhints?\b|\bwrong index\b|\buse index\b/
	),
	concept(
		'estimates-only',
		'no run-time figures',
		/\bplain explain\b|\bjust explain\b|\bestimates only\b|\bnot analy[sz]ed\b|\bstatement[_ ]timeout\b|\bnever (?:returns|finishes|comes back)\b|\bdoesn'?t finish\b|\bcancelled\b/
	),
	concept(
		'no-fault',
		'nothing wrong',
		/\bnothing (?:to (?:do|fix|repair)|wrong)\b|\bno (?:action|finding|fault|problem found|change)\b|\bhealthy\b|\bas (?:it should|designed)\b|\bworks as designed\b|\bfine as it is\b|\bfalse alarm\b/,
		true
	),
	concept(
		'lock-wait',
		'waiting for a lock',
		/\bdeadlock|\block_timeout\b|\bwait(?:s|ed|ing)? (?:for|behind)\b[^.]{0,30}\block|\b(?:access )?exclusive lock\b|\bidle in transaction\b|\bblock(?:s|ed|ing) (?:by|session)/
	),
	concept(
		'disk-full',
		'disk full',
		/\bno space left\b|\bdisk (?:is )?full\b|\bout of disk\b|\bvolume\b[^.]{0,20}\b(?:full|100)/
	),
	concept(
		'connections',
		'connections',
		/\bpool(?:er|s)?\b|\btoo many (?:connections|clients)\b|\bconnections? (?:refused|reset|exhausted|taken)\b|\bhandshake\b/
	),
	concept(
		'replication',
		'replication',
		/\breplica(?:tion)?\b[^.]{0,30}\b(?:lag|behind|paused)|\breplay\b|\bstandby\b|\bwal\b|\bconflict with recovery\b/
	)
];

const CLAUSE_END = /[.;:!?\n]+\s|[\n()"]|,\s+(?:but|and)\s|\sbut\s/;
/** Marks a clause that was a question: what somebody only wondered about ("Then bloat?"). */
const DOUBTED = ' ¿';
/** A denial reaches this many characters ahead within its clause. */
const DENIAL_REACH = 45;
const DENIAL =
	/\b(?:no|not|none|never|nothing|without|neither|nor|isn't|aren't|wasn't|don't|doesn't|didn't|won't|can't)\b/g;

/**
 * The ideas that a text speaks of, each once, in the order of the table. What it denies is left out ("not one
 * temporary file line", "no relation to parallel query"), because the night shift writes down what it ruled out.
 */
export function findConcepts(text: string): Concept[] {
	const marked = text
		.toLowerCase()
		.replaceAll('’', "'")
		.replaceAll(/\?(?!!)/g, `${DOUBTED}. `);
	const clauses = marked.split(CLAUSE_END);
	// Most ideas are nowhere in the text: one look at the whole saves one at each clause.
	return CONCEPTS.filter(
		(idea) => idea.says.test(marked) && clauses.some((clause) => isSaidIn(clause ?? '', idea))
	);
}

function isSaidIn(clause: string, idea: Concept): boolean {
	const met = idea.says.exec(clause);
	if (met === null) return false;
	if (idea.ownsNegation) return true;
	if (clause.endsWith(DOUBTED)) return false;
	for (const denial of clause.slice(0, met.index).matchAll(DENIAL)) {
		if (met.index - denial.index <= DENIAL_REACH) return false;
	}
	return true;
}
