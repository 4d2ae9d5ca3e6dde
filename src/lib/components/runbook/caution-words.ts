import type { Caution, CautionLevel } from '$lib/domain/caution/caution';

/** What a level means, in words: the number alone says nothing to a newcomer. */
export const LEVEL_WORDS: Record<CautionLevel, string> = {
	0: 'reads only',
	1: 'one session',
	2: 'loads or slows others',
	3: "blocks others or can't be undone"
};

/** "Caution 2: loads or slows others"; level 0 is no caution but a relief: "Reads only". */
export function sayLevel(level: CautionLevel): string {
	return level === 0 ? 'Reads only' : `Caution ${level}: ${LEVEL_WORDS[level]}`;
}

/** Who waits while a statement runs. */
export function sayWhoWaits({ reads, writes, schemaChanges }: Caution['blocks']): string {
	if (reads && writes) return 'reads and writes wait';
	if (writes) return 'writes wait; reads go on';
	if (reads) return 'reads wait; writes go on';
	return schemaChanges ? 'reads and writes go on; other maintenance waits' : 'nobody waits';
}

/** The locks taken, strongest first: "ShareUpdateExclusiveLock on yard_move"; null: none. */
export function sayLocks(locks: Caution['locks']): string | null {
	return locks.length === 0 ? null : locks.map(({ mode, on }) => `${mode} on ${on}`).join(', ');
}

/** A line of a caution: what it is about, and what it says. */
export interface CautionFact {
	name: string;
	text: string;
}

/** Everything a caution says of its statement, in the order in which one needs it; empty texts are left out. */
export function listFacts(caution: Caution): CautionFact[] {
	const { reads, writes, schemaChanges } = caution.blocks;
	const isNoticed = caution.locks.length > 0 || reads || writes || schemaChanges;
	const facts: CautionFact[] = [
		{ name: 'lock', text: isNoticed ? (sayLocks(caution.locks) ?? 'none') : '' },
		{ name: 'others', text: sayWhoWaits(caution.blocks) },
		{ name: 'load', text: caution.load },
		{ name: 'rewrites', text: caution.rewrites ? 'writes the whole table anew' : '' },
		{ name: 'cancelled', text: leaveNothing(caution.cancel) },
		{ name: 'undo', text: leaveNothing(caution.undo) },
		{ name: 'transaction', text: caution.inTransaction ? '' : "can't run inside a transaction block" }
	];
	return facts.filter((fact) => fact.text.trim() !== '');
}

/** Empty for a text that says no more than that there is nothing. */
function leaveNothing(text: string): string {
	return /^nothing( to undo|: it only reads)?\.?$/i.test(text.trim()) ? '' : text;
}
