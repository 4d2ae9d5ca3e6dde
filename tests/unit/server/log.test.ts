import { DatabaseError } from 'sequelize';
import { describe, expect, it } from 'vitest';
import { makeLog } from '$lib/server/log';

/** Logs one event and answers its line. */
function lineOf(fields: object): string {
	let line = '';
	makeLog('info', { write: (text) => (line += text) }).info(fields, 'event');
	return line;
}

describe('log', () => {
	it.each(['password', 'token', 'cookie', 'authorization', 'secret'])(
		'never writes a %s, however deep',
		(name) => {
			for (const fields of [
				{ [name]: 'hunter22' },
				{ a: { [name]: 'hunter22' } },
				{ a: { b: { [name]: 'hunter22' } } }
			]) {
				const line = lineOf(fields);
				expect(line).toContain('[redacted]');
				expect(line).not.toContain('hunter22');
			}
		}
	);

	it.each(['err', 'error'])(
		"writes a database's error under %s without the values of its statement",
		(name) => {
			const parent = Object.assign(new Error('SQLITE_ERROR: no such column'), {
				sql: "UPDATE people SET passwordHash = 'hunter22'"
			});
			const line = lineOf({ [name]: new DatabaseError(parent) });
			expect(line).toContain('no such column');
			expect(line).not.toContain('hunter22');
		}
	);
});
