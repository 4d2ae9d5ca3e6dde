import type { ReasonKind } from './precedent';

/**
 * Every number that the ranking of precedents turns on. DESIGN.md says how they were found; the bench
 * (`npm run bench:precedents -- DIR`) says what a change does.
 */

/**
 * What each respect counts in the fused score, before it is divided by the sum of those that the incident
 * asked about can be compared on. Each 0..1; 0 switches a part off.
 */
export const PART_WEIGHTS: Readonly<Record<ReasonKind, number>> = {
	/** Useful 0.1..0.3. Higher: old tales with the same words come before new ones with the same fault. */
	words: 0.13,
	/** Useful 0.2..0.5. Higher: what is seen counts more than why it happened. */
	symptoms: 0.4,
	/** Useful 0.3..0.8. Higher: one wrong guess of the rules pulls more wrong precedents up. */
	cause: 0.6,
	/** Useful 0.1..0.3. Higher: plans of one shape meet although their faults differ. */
	statement: 0.13,
	/** Useful 0..0.1. Higher: one's own service comes first whatever its fault. */
	setting: 0.02,
	/** Useful 0.1..0.5. Higher: one person's verdict outdoes the evidence. Counts only where there is one. */
	verdict: 0.3
};

/**
 * The part of the question's own BM25 score at which a text counts as fully alike. Useful 0.3..0.8; higher:
 * words weigh less in all but near copies. 0 is invalid.
 */
export const FULL_WORDS_SHARE = 0.5;

/** How far a symptom's weight (0..1) sets what it counts. 0: a slight one counts like a heavy one. Useful 0..0.7. */
export const HEAVINESS_COUNTS = 0.3;
/** Taken off a common symptom when one spill was planned and the other grew. Useful 0..0.4. */
export const COURSE_COUNTS = 0.15;
/** Taken off when it shows at another kind of operator. Useful 0..0.4. */
export const PLACE_COUNTS = 0.2;
/** Taken off when its figures lie three decades apart, less when nearer. Useful 0..0.3. */
export const DECADE_COUNTS = 0.15;
/** What a symptom that only the narrative tells of counts beside one that evidence shows. Useful 0..0.6. */
export const TOLD_COUNTS = 0.4;

/** What a lack of run-time figures counts beside a fault: it says how the plan was taken. Useful 0..0.5. */
export const LACK_COUNTS = 0.25;
/** What symptoms as a whole count where the one asked about has only told ones. Useful 0.1..0.5. */
export const ONLY_TOLD_SYMPTOMS = 0.25;
/** What causes as a whole count where the one asked about has only told ones. Useful 0.2..0.6. */
export const ONLY_TOLD_CAUSES = 0.4;

/** Power that confidences are raised to. Higher: the first cause outweighs the others more. Useful 1..3. */
export const CAUSE_SHARPNESS = 3;
/** Power that the rarity of a cause is raised to. Higher: a rare cause of little confidence leads. Useful 0..1. */
export const CAUSE_RARITY = 0.5;
/** What the symptoms that a cause rests on count beside the cause itself. Useful 0.5..2. */
export const GROUNDS_COUNT = 1.5;
/** How far a cause is believed that only the narrative names. Useful 0.1..0.5. */
export const TOLD_CAUSE_COUNTS = 0.3;
/** How far a cause is believed whose remedy the resolution names, where no evidence speaks. Useful 0.3..0.8. */
export const REMEDY_COUNTS = 0.6;
/** What is left of the likeness in causes where the other incident has none but told ones. Useful 0.3..0.8. */
export const TOLD_CAUSES_KEEP = 0.5;
/** What words add to the belief where evidence speaks too. Useful 0..0.3. */
export const TOLD_BESIDE_EVIDENCE = 0.15;
/** What the rules' guesses count once a person has confirmed a cause. Useful 0..0.5. */
export const DOUBT_AFTER_CONFIRMATION = 0.25;

/** Likeness of two statements that are not the same; the three add up to 0.8, so that the same one stands out. */
export const TRAITS_COUNT = 0.45;
export const SHAPE_COUNTS = 0.2;
export const RELATIONS_COUNT = 0.15;

/** How many times the statement counts when it is the very same one: that is hardly ever chance. Useful 1..5. */
export const SAME_STATEMENT_COUNTS = 4;

/** Same service, engine, database; they add up to 1. */
export const SERVICE_COUNTS = 0.4;
export const ENGINE_COUNTS = 0.4;
export const DATABASE_COUNTS = 0.2;

/** What a verdict on the pair says, 0..1. */
export const VERDICT_SAME = 1;
export const VERDICT_RELATED = 0.6;
/** What is left of the score of a pair that somebody refused. Useful 0..0.7; 1 would ignore the refusal. */
export const REFUSED_KEEPS = 0.4;

/** Scores nearer than this are a tie: known outcome first, then the newer one. */
export const TIE = 0.002;

/** A reason with a smaller share than this isn't worth a line. */
export const SMALLEST_SHARE = 0.04;
