/**
 * Stems of the trade's own words: what a plan, a log or a fix is told in. They are asked for however common
 * they are, because in a story about a slow statement they say more than the rare names of ships or customers.
 * Common practice of the trade, no source.
 */
export const TRADE_STEMS: ReadonlySet<string> = new Set(
	`aggregat analyz autovacuum batch begin bitmap bloat block bucket buffer build cach cardinality cast cold column
compil condition correlat cte dead dependen disk distinct duplicat estimat examin explain expression external fetch
fil filesort fillfactor filter forc function gather generic group hash heap hint index inner jit join key keyset
limit load lookup loop lossy map materializ memory merg misestimat n_distinct nest offset outer page parallel
paramet partial partition pass plan planner predicat prepar prewarm probe recheck rewrit seq skew slow sort spill
statement statistic subplan subquery temporary timeout tupl underestimat unnest vacuum visibility warm window
work_mem worker wrap`
		.split(/\s+/)
		.filter((stem) => stem !== '')
);
