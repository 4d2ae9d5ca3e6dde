import type { Caution, CautionLevel } from './caution';
import { POSTGRES_CHECKS, POSTGRES_RULES, type PostgresRule, type PostgresThing } from './engines/postgresql';
import type { Finding } from './engines/postgresql-tree';
import { blocksOf, strengthOf, type LockMode } from './lock-modes';

interface Lock {
	mode: LockMode;
	on: string;
	/** Nobody can see the thing yet. */
	unseen: boolean;
}

/** What is said of a thing that the statement does not name. */
const UNNAMED: Partial<Record<PostgresThing, string>> = {
	'referenced-by-constraint': 'the referenced table, where the constraint is a foreign key'
};

/** One caution from the rows that a statement is: the strongest gives kind and level, the locks are all of them. */
export function toCaution(sql: string, findings: readonly Finding[]): Caution {
	const locks = findings.flatMap(locksOf);
	const blocks = blocksOf(locks.filter(({ unseen }) => !unseen).map(({ mode }) => mode));
	const ordered = [...findings].sort((a, b) => weigh(b) - weigh(a));
	const rules = ordered.map(ruleOf);
	const [first] = ordered;
	const [firstRule] = rules;
	const level = Math.max(
		...rules.map((row) => row.level),
		blocks.reads || blocks.writes ? 3 : 0
	) as CautionLevel;
	const shown = strongestEach(locks);
	return {
		sql,
		understood: true,
		kind: first?.shownAs ?? first?.kind ?? 'select',
		locks: shown,
		lock: shown[0] ?? null,
		blocks,
		rewrites: rules.some((row) => row.rewrites),
		inTransaction: rules.every((row) => row.inTransaction),
		level,
		cancel: joinTexts(ordered, (finding) => ruleOf(finding).cancel),
		undo: joinTexts(ordered, (finding) => ruleOf(finding).undo),
		load: joinTexts(ordered, (finding) => [finding.note, ruleOf(finding).load].filter(Boolean).join(' ')),
		precheck: unique(ordered.flatMap(checksOf)),
		basis: firstRule === undefined ? null : { source: 'PostgreSQL manual', section: firstRule.section }
	};
}

/** A statement that nothing is known about: the highest level, until a curator has written a caution. */
export function notUnderstood(sql: string, why: string): Caution {
	return {
		sql,
		understood: false,
		kind: 'not-understood',
		locks: [],
		lock: null,
		blocks: { reads: false, writes: false, schemaChanges: false },
		rewrites: false,
		inTransaction: false,
		level: 3,
		cancel: 'Not known.',
		undo: 'Not known.',
		load: `Not understood: ${why} Take it for the worst until a curator has written its caution.`,
		precheck: ['Read the manual of your version on this command, and try it on a copy first.'],
		basis: null
	};
}

function ruleOf(finding: Finding): PostgresRule {
	return POSTGRES_RULES[finding.kind];
}

function weigh(finding: Finding): number {
	return ruleOf(finding).level * 100 + Math.max(-1, ...locksOf(finding).map(({ mode }) => strengthOf(mode)));
}

function locksOf(finding: Finding): Lock[] {
	const ruled = ruleOf(finding).locks.flatMap(([mode, thing]) =>
		namesOf(finding, thing).map((on) => ({ mode, on, unseen: thing === 'new' }))
	);
	return [...ruled, ...(finding.named ?? []).map((lock) => ({ ...lock, unseen: false }))];
}

function namesOf(finding: Finding, thing: PostgresThing): string[] {
	const named = finding.things[thing];
	if (named !== undefined) return named;
	const unnamed = UNNAMED[thing];
	return unnamed === undefined ? [] : [unnamed];
}

/** The strongest lock on each thing, strongest first. */
function strongestEach(locks: readonly Lock[]): { mode: string; on: string }[] {
	const strongest = new Map<string, Lock>();
	for (const lock of locks) {
		const held = strongest.get(lock.on);
		if (held === undefined || strengthOf(lock.mode) > strengthOf(held.mode)) strongest.set(lock.on, lock);
	}
	return [...strongest.values()]
		.sort((a, b) => Number(a.unseen) - Number(b.unseen) || strengthOf(b.mode) - strengthOf(a.mode))
		.map(({ mode, on }) => ({ mode, on }));
}

function joinTexts(findings: readonly Finding[], text: (finding: Finding) => string): string {
	return unique(findings.map((finding) => fill(text(finding), finding))).join(' ');
}

/** Settings that take memory, times sessions and operators. */
const MEMORY_SETTING = /mem|buffers|workers|connections/;

function checksOf(finding: Finding): string[] {
	const setting = finding.words?.setting;
	const takesMemory = setting === undefined || MEMORY_SETTING.test(setting);
	return ruleOf(finding)
		.precheck.filter((check) => check !== 'memory-exposure' || takesMemory)
		.map((check) => fill(POSTGRES_CHECKS[check], finding));
}

/** Puts the statement's own names into a text of the table. */
function fill(text: string, finding: Finding): string {
	return text.replace(/\{(\w+)\}/g, (_whole, word: string) => {
		const thing = finding.things[word as PostgresThing]?.join(', ');
		return finding.words?.[word] ?? thing ?? `the ${word}`;
	});
}

function unique(texts: readonly string[]): string[] {
	return [...new Set(texts)];
}
