import { fingerprintStatement } from '../../fingerprint';
import type { SpillingStatement, Spills } from '../../reading';
import { bareStatement } from '../statement-above';

/** Statements kept while reading; a log with more keeps those that spilled most. */
const STATEMENTS_KEPT = 2_000;
const STATEMENTS_SHOWN = 200;
const TEXT_LENGTH = 20_000;

/** Temporary files that no statement has been found for yet. */
export interface OpenSpill {
	files: number;
	bytes: number;
	firstAt: string | null;
	lastAt: string | null;
}

/** Adds up temporary files by statement in bounded memory. */
export class SpillLedger {
	private events = 0;
	private files = 0;
	private bytes = 0;
	private readonly byFingerprint = new Map<string, SpillingStatement>();
	/** The same text comes with every file of a statement: its fingerprint is worked out once. */
	private lastText = '';
	private lastStatement: SpillingStatement | null = null;

	countEvent(): void {
		this.events++;
	}

	countFile(bytes: number): void {
		this.events++;
		this.files++;
		this.bytes += bytes;
	}

	/** Charges files to a masked statement. */
	charge(maskedSql: string, spill: OpenSpill): void {
		const statement = this.statementOf(maskedSql);
		if (statement === null) return;
		statement.files += spill.files;
		statement.bytes += spill.bytes;
		if (spill.firstAt !== null && (statement.firstAt === null || spill.firstAt < statement.firstAt)) {
			statement.firstAt = spill.firstAt;
		}
		if (spill.lastAt !== null && (statement.lastAt === null || spill.lastAt > statement.lastAt)) {
			statement.lastAt = spill.lastAt;
		}
	}

	total(): Spills {
		const statements = [...this.byFingerprint.values()].sort((a, b) => b.bytes - a.bytes);
		return {
			events: this.events,
			files: this.files,
			bytes: this.bytes,
			statements: statements.slice(0, STATEMENTS_SHOWN)
		};
	}

	private statementOf(maskedSql: string): SpillingStatement | null {
		if (maskedSql === this.lastText && this.lastStatement !== null) return this.lastStatement;
		const text = bareStatement(maskedSql);
		if (text === null) return null;
		const fingerprint = fingerprintStatement(text);
		let statement = this.byFingerprint.get(fingerprint);
		if (statement === undefined) {
			if (this.byFingerprint.size >= STATEMENTS_KEPT) this.dropSmallest();
			statement = {
				fingerprint,
				text: text.slice(0, TEXT_LENGTH),
				files: 0,
				bytes: 0,
				firstAt: null,
				lastAt: null
			};
			this.byFingerprint.set(fingerprint, statement);
		}
		this.lastText = maskedSql;
		this.lastStatement = statement;
		return statement;
	}

	private dropSmallest(): void {
		const bySize = [...this.byFingerprint.values()].sort((a, b) => a.bytes - b.bytes);
		for (const { fingerprint } of bySize.slice(0, STATEMENTS_KEPT / 2))
			this.byFingerprint.delete(fingerprint);
	}
}
