import { MaskedOutput } from './masked-output';

/** An open bracket of the output. */
interface Group {
	/** Offset of the bracket in the output. */
	start: number;
	/** Where its first element ends; null before the first comma. */
	firstEnd: number | null;
	literals: number;
	/** Holds nothing but literals so far. */
	simple: boolean;
	collapses: boolean;
}

/** A row of literals that collapsed is short; one of casts that is longer is not compared. */
const ROW_LENGTH = 1_000;

/** A list of literals collapses behind these words, or behind no word at all: never as arguments of a function. */
const BEFORE_LIST = new Set(['in', 'values', 'any', 'all', 'some', 'array']);

/**
 * The output of the masker. Lists of nothing but literals collapse to their first element, `IN (?, ?)` to `IN (?)`,
 * and rows of VALUES that are like the one before go.
 */
export class LiteralLists {
	private readonly out = new MaskedOutput();
	private readonly groups: Group[] = [];
	/** The last row of VALUES: its depth, where it ends, and its text where it collapsed. */
	private rows: { depth: number; end: number; text: string } | null = null;

	get text(): string {
		return this.out.toString();
	}

	append(text: string): void {
		this.out.append(text);
	}

	open(named: boolean, word: string): void {
		const depth = this.groups.length;
		if (word === 'values') this.rows = { depth, end: -1, text: '' };
		const collapses = !named || BEFORE_LIST.has(word);
		this.groups.push({ start: this.out.length - 1, firstEnd: null, literals: 0, simple: true, collapses });
	}

	comma(): void {
		const group = this.groups[this.groups.length - 1];
		if (group !== undefined) group.firstEnd ??= this.out.solidLength;
		this.out.append(',');
	}

	close(bracket: string): void {
		const group = this.groups.pop();
		if (group === undefined) {
			this.out.append(bracket);
			return;
		}
		if (group.simple && group.literals > 1 && group.collapses && group.firstEnd !== null) {
			this.out.truncate(group.firstEnd);
		}
		this.out.append(bracket);
		const parent = this.groups[this.groups.length - 1];
		if (parent !== undefined) {
			if (!group.simple) parent.simple = false;
			else if (group.literals > 0) parent.literals++;
		}
		if (this.rows?.depth === this.groups.length) this.closeRow(group, this.rows);
	}

	countLiteral(): void {
		const group = this.groups[this.groups.length - 1];
		if (group !== undefined) group.literals++;
		else this.rows = null;
	}

	/** Something else than a literal came: the list stays as it is. */
	spoil(word = ''): void {
		const group = this.groups[this.groups.length - 1];
		if (group !== undefined) group.simple = false;
		if (this.rows !== null && this.groups.length <= this.rows.depth && word !== 'values') this.rows = null;
	}

	private closeRow(group: Group, last: { depth: number; end: number; text: string }): void {
		const collapsed = group.simple && group.literals > 0 && this.out.length - group.start <= ROW_LENGTH;
		const text = collapsed ? this.out.from(group.start) : '';
		const repeats = text !== '' && text === last.text && this.isCommaBetween(last.end, group.start);
		if (repeats) this.out.truncate(last.end);
		else this.rows = { depth: last.depth, end: this.out.length, text };
	}

	private isCommaBetween(end: number, start: number): boolean {
		if (end < 0 || start - end > ROW_LENGTH) return false;
		return (
			this.out
				.from(end)
				.slice(0, start - end)
				.trim() === ','
		);
	}
}
