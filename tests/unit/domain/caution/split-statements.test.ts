import { describe, expect, it } from 'vitest';
import { splitStatements, stripComments } from '$lib/domain/caution/split-statements';

const MYSQL = { hashComments: true, backslashEscapes: true };

describe('splitStatements', () => {
	it('does not split inside quotes, dollar quotes or comments', () => {
		const text = `select ';', "a;b", $$c;d$$, $x$e;$$;f$x$ -- g;h\n, /* i;j */ 1`;
		expect(splitStatements(text)).toEqual([text]);
	});

	it('takes a doubled quote as part of the text', () => {
		expect(splitStatements("select 'it''s;'; select 2")).toEqual(["select 'it''s;'", 'select 2']);
	});

	it('leaves out what holds only white space and comments', () => {
		expect(splitStatements('; ;-- nothing\n; analyze t ;/* end */')).toEqual(['analyze t']);
	});

	it('does not read # as a comment unless the engine does', () => {
		expect(splitStatements("select a #> '{x}'; select 1")).toHaveLength(2);
		expect(splitStatements('select 1 # a; b\n; select 2', MYSQL)).toHaveLength(2);
	});

	it('lets a backslash take the quote with it only where the engine does', () => {
		expect(splitStatements("select '\\'; select '2'")).toHaveLength(2);
		expect(splitStatements("select '\\'; select '2'", MYSQL)).toHaveLength(1);
	});

	it('ends with what is left when a quote is never closed', () => {
		expect(splitStatements("select 1; select 'oh; no")).toEqual(['select 1', "select 'oh; no"]);
	});
});

describe('stripComments', () => {
	it('folds white space and drops comments', () => {
		expect(stripComments('/* a */ delete\n\tfrom t -- all of it\n')).toBe('delete from t');
	});
});
