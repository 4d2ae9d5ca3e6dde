import { readFileSync } from 'node:fs';
import { describe, expect, test } from 'vitest';
import { readEvidenceWithHints } from '$lib/domain/reading/read-evidence';
import { evidenceOf, expectedOf, inPieces, mask, read, readOne } from '../../../../fixtures/evidence-files';

const FILE = 'temporary file: path "base/pgsql_tmp/pgsql_tmp4711.0", size 1000';
const at = '2026-03-01 02:00:00.123 UTC';

const saved = ['postgres-log', 'postgres-csvlog', 'postgres-jsonlog'].flatMap((format) => evidenceOf(format));

describe('server logs', () => {
	test.each(saved.map((one) => [`${one.format}/${one.name}`, one] as const))(
		'add up the temporary files of %s and name who wrote them',
		async (_title, fixture) => {
			const expected = expectedOf(fixture);
			const { readings, hints } = await readEvidenceWithHints(inPieces(readFileSync(fixture.path)), 'log');
			const spills = readings[0]?.spills;
			expect(spills?.files).toBe(expected['temporaryFiles']);
			expect(spills?.bytes).toBe(expected['temporaryBytes']);
			// Every file has its statement, workers' files too.
			expect(spills?.statements.reduce((sum, { bytes }) => sum + bytes, 0)).toBe(expected['temporaryBytes']);
			if (expected['temporaryFiles'] === 0) return;
			expect(hints?.users).toContain(expected['user']);
			expect(hints?.databases).toContain(expected['database']);
			expect(hints?.applications).toContain(expected['application']);
			for (const { firstAt, lastAt } of spills?.statements ?? []) {
				expect(firstAt).toMatch(/^\d{4}-\d\d-\d\dT\d\d:\d\d:\d\d\.\d{3}Z$/);
				expect(String(lastAt) >= String(firstAt)).toBe(true);
			}
		}
	);

	test('give each plan of auto_explain a reading of its own, with its statement and duration', async () => {
		for (const fixture of saved.filter((one) =>
			['text', 'json'].includes(String(expectedOf(one)['plansInside']))
		)) {
			const plans = (await read(readFileSync(fixture.path))).filter(({ kind }) => kind === 'plan');
			if (fixture.name === 'healthy-bitmap') continue;
			expect(plans.length, fixture.name).toBeGreaterThan(0);
			for (const plan of plans) {
				expect(plan.format).toBe('postgres-auto-explain');
				expect(plan.statement?.fingerprint).toMatch(/^[0-9a-f]{16}$/);
				expect(plan.plan?.totalMs).toBeGreaterThan(0);
			}
		}
	});

	test.each([
		['%m [%p] ', `${at} [4711] `],
		['%m [%p] %q%u@%d ', `${at} [4711] biller@freight `],
		[
			'%t [%p]: user=%u,db=%d,app=%a,client=%h ',
			`2026-03-01 02:00:00 UTC [4711]: user=biller,db=freight,app=night run,client=10.2.3.4 `
		],
		['%n [%p] ', '1772330400.123 [4711] '],
		['%c %l %m ', `69a39f20.1267 3 ${at} `],
		['%u %p %a ', 'biller 4711 night-run '],
		['%p ', '4711 '],
		['no prefix at all', '']
	])('join statements to files under the prefix %s', async (_prefix, prefix) => {
		const text = `${prefix}LOG:  ${FILE}\n${prefix}STATEMENT:  SELECT 1\n\tFROM crate\n${prefix}LOG:  ${FILE}\n${prefix}STATEMENT:  SELECT 2 \tFROM crate;\n`;
		const reading = await readOne(text);
		expect(reading.format).toBe('postgres-log');
		expect(reading.spills).toMatchObject({ events: 2, files: 2, bytes: 2000 });
		expect(reading.spills?.statements).toMatchObject([{ files: 2, bytes: 2000 }]);
	});

	// The messages as the server's own translations print them.
	test.each([
		['German', 'LOG', 'temporäre Datei: Pfad »base/pgsql_tmp/pgsql_tmp4711.0«, Größe 1000', 'ANWEISUNG'],
		[
			'French',
			'LOG',
			'fichier temporaire : chemin « base/pgsql_tmp/pgsql_tmp4711.0 », taille 1000',
			'INSTRUCTION '
		],
		[
			'Russian',
			'СООБЩЕНИЕ',
			'временный файл: путь "base/pgsql_tmp/pgsql_tmp4711.0", размер 1000',
			'ОПЕРАТОР'
		],
		['Japanese', 'LOG', '一時ファイル: パス"base/pgsql_tmp/pgsql_tmp4711.0"、サイズ 1000', 'ステートメント'],
		['Chinese', '日志', '临时文件: 路径 "base/pgsql_tmp/pgsql_tmp4711.0", 大小 1000', '语句']
	])('read a server that speaks %s', async (_language, severity, message, statement) => {
		const prefix = `${at} [4711] `;
		const reading = await readOne(
			`${prefix}${severity}:  ${message}\n${prefix}${statement}:  SELECT a FROM crate WHERE b = 5\n`
		);
		expect(reading.spills).toMatchObject({
			files: 1,
			bytes: 1000,
			statements: [{ text: 'SELECT a FROM crate WHERE b = ?' }]
		});
	});

	test('keep processes apart when their lines interleave', async () => {
		const line = (pid: number, severity: string, message: string) =>
			`${at} [${pid}] ${severity}:  ${message}\n`;
		const file = (pid: number, size: number) =>
			line(pid, 'LOG', `temporary file: path "base/pgsql_tmp/pgsql_tmp${pid}.0", size ${size}`);
		const text =
			file(1, 10) +
			file(2, 500) +
			line(1, 'STATEMENT', 'SELECT one') +
			line(2, 'CONTEXT', 'parallel worker') +
			line(2, 'STATEMENT', 'SELECT two');
		const reading = await readOne(text);
		expect(reading.spills?.statements).toMatchObject([
			{ text: 'SELECT two', bytes: 500 },
			{ text: 'SELECT one', bytes: 10 }
		]);
	});

	test.each([
		['UTC', '2026-03-01T02:00:00.123Z', []],
		['CEST', '2026-03-01T00:00:00.123Z', []],
		['EST', '2026-03-01T07:00:00.123Z', []],
		['+0330', '2026-02-28T22:30:00.123Z', []],
		['-05', '2026-03-01T07:00:00.123Z', []],
		['IST', '2026-03-01T02:00:00.123Z', ['ambiguous-time-zone']]
	])('read times in %s', async (zone, expected, warnings) => {
		const prefix = `2026-03-01 02:00:00.123 ${zone} [4711] `;
		const reading = await readOne(`${prefix}LOG:  ${FILE}\n${prefix}STATEMENT:  SELECT 1\n`);
		expect(reading.spills?.statements[0]?.firstAt).toBe(expected);
		expect(reading.warnings.map(({ code }) => code)).toEqual(warnings);
	});

	test('count a file without a statement and say so', async () => {
		const reading = await readOne(`${at} [4711] LOG:  ${FILE}\n`);
		expect(reading.spills).toMatchObject({ files: 1, statements: [] });
		expect(reading.warnings.map(({ code }) => code)).toEqual(['spill-without-statement']);
	});

	test('take the statement that was logged before it ran where the file names none', async () => {
		const prefix = `${at} [4711] `;
		const reading = await readOne(`${prefix}LOG:  statement: SELECT a FROM crate\n${prefix}LOG:  ${FILE}\n`);
		expect(reading.spills?.statements).toMatchObject([{ text: 'SELECT a FROM crate', bytes: 1000 }]);
	});

	test('count a statement that ran into temp_file_limit as an event without a file', async () => {
		const reading = await readOne(
			`${at} [4711] ERROR:  temporary file size exceeds temp_file_limit (1024kB)\n`
		);
		expect(reading.spills).toMatchObject({ events: 1, files: 0, bytes: 0 });
	});

	test('tell the version from the banner of the start', async () => {
		const text = `${at} [1] LOG:  starting PostgreSQL 16.4 on x86_64-pc-linux-gnu, compiled by gcc, 64-bit\n`;
		expect((await readOne(text)).engineVersion).toBe('16.4');
	});

	test('mask what messages quote of the data', async () => {
		const prefix = `${at} [4711] biller@freight `;
		const text =
			`${prefix}ERROR:  duplicate key value violates unique constraint "crate_pkey"\n` +
			`${prefix}DETAIL:  Key (crate_id, owner)=(4711, Klopstock) already exists.\n` +
			`${prefix}STATEMENT:  INSERT INTO crate VALUES (4711, 'Klopstock',\n\t'second line')\n` +
			`${prefix}LOG:  duration: 12.100 ms  execute s1: SELECT * FROM crate WHERE owner = $1 AND id > 90210\n` +
			`${prefix}DETAIL:  parameters: $1 = 'Klopstock'\n` +
			`${prefix}ERROR:  invalid input syntax for type integer: "Klopstock"\n` +
			`${prefix}LOG:  connection received: host=192.168.7.9 port=5120\n`;
		const masked = await mask(text);
		expect(masked).not.toMatch(/Klopstock|second line|90210|\(4711|192\.168/);
		expect(masked).toContain('unique constraint "crate_pkey"');
		expect(masked).toContain('INSERT INTO crate VALUES (?)');
		expect(masked).toContain('owner = $1 AND id > ?');
	});
});
