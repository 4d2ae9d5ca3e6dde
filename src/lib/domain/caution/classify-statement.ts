import { hasSqlDetails, loadModule, parseSync, type RawStmt } from 'libpg-query';
import type { Engine } from '../reading/reading';
import type { Caution } from './caution';
import { notUnderstood, toCaution } from './caution-from-findings';
import { classifyByKeywords } from './engines/keywords';
import { classifyNode } from './engines/postgresql-classify';
import type { Classified } from './engines/postgresql-tree';
import { fillPlaceholders, placeholderRestorer, restorePlaceholders } from './placeholders';
import { splitStatements, stripComments } from './split-statements';

/**
 * Signs of which PostgreSQL's scanner makes operators and the beginnings of comments. It takes the longest run
 * of them and gives back all but what it needs (scan.l, `yyless`), again for each sign: time grows with the
 * square of the run's length. Nobody writes so many of them in a row.
 */
const ENDLESS_RUN = /[~!@#^&|`?+\-*/%<>=]{500}/;

let loading: Promise<void> | null = null;

/**
 * What each statement of a script does to production, one caution a statement in the order written; empty for
 * a script of nothing but comments. PostgreSQL is read by its own grammar and looked up in the lock table; of
 * the other engines only the plainest statements are known by their first words. What is not known for certain
 * is said to be not understood (level 3). Placeholders such as `{{table}}` stand for names.
 */
export async function cautionsFor(
	engine: Engine,
	engineVersion: string | null,
	sql: string
): Promise<Caution[]> {
	if (engine !== 'postgresql') return classifyByKeywords(engine, sql);
	loading ??= loadModule();
	await loading;
	const filled = fillPlaceholders(sql);
	const whole = parse(filled);
	if ('statements' in whole) return cautionsOfStatements(whole.statements, sql, engineVersion);
	return splitStatements(sql).flatMap((piece) => cautionsOfPiece(piece, engineVersion));
}

function cautionsOfPiece(piece: string, engineVersion: string | null): Caution[] {
	const filled = fillPlaceholders(piece);
	const parsed = parse(filled);
	if ('statements' in parsed) return cautionsOfStatements(parsed.statements, piece, engineVersion);
	return [
		notUnderstood(piece, `PostgreSQL's grammar refuses it (${restorePlaceholders(parsed.why, piece)}).`)
	];
}

function parse(sql: string): { statements: RawStmt[] } | { why: string } {
	// The parser takes an empty text for a mistake of the caller.
	if (stripComments(sql) === '') return { statements: [] };
	if (sql.includes('\0')) return { why: 'a zero byte would hide what follows it' };
	if (ENDLESS_RUN.test(sql)) return { why: 'more than 500 signs of operators in a row' };
	try {
		return { statements: parseSync(sql).stmts ?? [] };
	} catch (error) {
		// The parser reports by throwing: a syntax error, or a tree too deep for it. Anything else is a bug.
		if (error instanceof RangeError) return { why: 'nested too deeply' };
		if (!hasSqlDetails(error)) throw error;
		return { why: error.message };
	}
}

/** A script as its statements are cut out of it: encoded and looked through once, however many there are. */
interface Script {
	bytes: Uint8Array;
	restore: (text: string) => string;
}

function cautionsOfStatements(statements: RawStmt[], sql: string, engineVersion: string | null): Caution[] {
	const script: Script = { bytes: new TextEncoder().encode(sql), restore: placeholderRestorer(sql) };
	return statements.map((statement) => cautionOf(statement, script, engineVersion));
}

function cautionOf(statement: RawStmt, script: Script, engineVersion: string | null): Caution {
	const text = textOfStatement(statement, script.bytes);
	const found = classify(statement, engineVersion);
	if ('why' in found) return notUnderstood(text, script.restore(found.why));
	return restoreTexts(toCaution(text, found), script.restore);
}

function classify(statement: RawStmt, engineVersion: string | null): Classified {
	if (statement.stmt === undefined) return { why: 'It is empty.' };
	try {
		return classifyNode(statement.stmt, engineVersion);
	} catch (error) {
		if (error instanceof RangeError) return { why: 'It is nested too deeply.' };
		throw error;
	}
}

/** The statement as it was written. Positions are bytes of UTF-8, and fillPlaceholders keeps them. */
function textOfStatement(statement: RawStmt, bytes: Uint8Array): string {
	const from = statement.stmt_location ?? 0;
	const end =
		statement.stmt_len === undefined || statement.stmt_len === 0 ? bytes.length : from + statement.stmt_len;
	return new TextDecoder().decode(bytes.subarray(from, end)).trim();
}

function restoreTexts(caution: Caution, restore: (text: string) => string): Caution {
	const locks = caution.locks.map(({ mode, on }) => ({ mode, on: restore(on) }));
	return {
		...caution,
		locks,
		lock: locks[0] ?? null,
		cancel: restore(caution.cancel),
		undo: restore(caution.undo),
		load: restore(caution.load),
		precheck: caution.precheck.map(restore)
	};
}
