/**
 * Words that tell nothing apart: the commonest of English and what every night shift writes whatever happened.
 * Words that negate ("no", "not", "without") are stop words too; trade-words.ts looks at them before they go.
 */
export const STOP_WORDS: ReadonlySet<string> = new Set(
	`a about above after again against ago all almost alone along already also although always am among an and
another any anybody anyone anything anyway are aren around as aside ask asked at away back be became because become
been before behind being below besides between both but by came can cannot come could couldn did didn do does doesn
doing don done down during each either else enough especially etc even ever every everybody everyone everything
exactly far few finally first for found from further gave get gets getting give given go goes going gone got had
hadn half hardly has hasn have haven having he hence her here hers him his how however i if in indeed instead into is
isn it its itself just keep kept kind knew know known last later least less let like little ll look looked looking
looks made mainly make makes making many matter may maybe me mean means meant might mine minute minutes more most
mostly much must my myself near nearly need needed needs neither never nevertheless next no nobody none nor not
nothing now nowhere of off often oh ok okay on once one ones only onto or other others otherwise our ours out over
own per perhaps please put quite rather re really s said same saw say says second seconds see seen seems several
shall she should shouldn since so some somebody someone something sometimes somewhere soon still such sure t take
taken takes than that the their theirs them then there therefore these they thing things think this those though
thought through thus till to today together told tomorrow too took toward towards tried try turned twice two under
unless until up upon us use used uses using usual usually ve very via want wanted wants was wasn way we well went
were weren what whatever when where whether which while who whole whom whose why will with within without won work
worked works would wouldn yes yesterday yet you your yours
monday tuesday wednesday thursday friday saturday sunday january february march april june july august september
october november december morning noon afternoon evening night day days week weeks month months year years hour hours
ms sec min mb kb gb kib mib gib percent`
		.split(/\s+/)
		.filter((word) => word !== '')
);
