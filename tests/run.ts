/**
 * The one test command: lint, types, unit, service and API tests, the build, browser tests.
 * Ends with the true count, `N passed, N failed`: each test counts one, and so does each of the checks
 * that are no tests (format, lint, types, build). Exit 1 where anything failed.
 */
import { spawn } from 'node:child_process';
import { existsSync, mkdtempSync, readFileSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';

interface Count {
	passed: number;
	failed: number;
	skipped: number;
}

const CI = Boolean(process.env.CI);
const CHROMIUM_PLACES = ['/usr/bin/chromium', '/usr/bin/chromium-browser'];
const chromium = process.env.CHROMIUM_PATH ?? CHROMIUM_PLACES.find((place) => existsSync(place));
const scratch = mkdtempSync(join(tmpdir(), 'catchwater-tests-'));
const total: Count = { passed: 0, failed: 0, skipped: 0 };

/** Runs a program of node_modules and answers its exit code; its output passes through. */
function run(program: string, args: string[], env: Record<string, string> = {}): Promise<number> {
	return new Promise((resolve) => {
		const child = spawn(join('node_modules', '.bin', program), args, {
			stdio: ['ignore', 'inherit', 'inherit'],
			env: { ...process.env, ...env }
		});
		child.on('error', (error) => {
			console.error(`${program} could not be started: ${error.message}`);
			resolve(127);
		});
		child.on('close', (code) => resolve(code ?? 1));
	});
}

function add(name: string, count: Count, startedAt: number): void {
	total.passed += count.passed;
	total.failed += count.failed;
	total.skipped += count.skipped;
	const seconds = Math.round((Date.now() - startedAt) / 1000);
	const verdict = count.failed === 0 ? 'well' : 'FAILED';
	console.log(`── ${name}: ${verdict}, ${count.passed} passed, ${count.failed} failed (${seconds} s)`);
}

async function check(name: string, program: string, args: string[]): Promise<boolean> {
	const startedAt = Date.now();
	const code = await run(program, args);
	add(name, { passed: code === 0 ? 1 : 0, failed: code === 0 ? 0 : 1, skipped: 0 }, startedAt);
	return code === 0;
}

/** What a runner wrote as JSON; null where it wrote none, which is a failure of its own. */
function readReport(path: string): Record<string, unknown> | null {
	if (!existsSync(path)) return null;
	const report: unknown = JSON.parse(readFileSync(path, 'utf8'));
	return typeof report === 'object' && report !== null ? (report as Record<string, unknown>) : null;
}

const number = (value: unknown): number => (typeof value === 'number' ? value : 0);

async function unitTests(): Promise<void> {
	const startedAt = Date.now();
	const path = join(scratch, 'vitest.json');
	const code = await run('vitest', [
		'run',
		'--reporter=default',
		'--reporter=json',
		`--outputFile.json=${path}`
	]);
	const report = readReport(path);
	const count: Count = {
		passed: number(report?.numPassedTests),
		failed: number(report?.numFailedTests),
		skipped: number(report?.numPendingTests) + number(report?.numTodoTests)
	};
	// A file that could not be loaded holds no test that failed; its failure still counts.
	if (code !== 0 && count.failed === 0) count.failed = 1;
	add('unit, service and API tests', count, startedAt);
}

async function browserTests(): Promise<void> {
	const startedAt = Date.now();
	if (chromium === undefined) {
		const reason = 'browser tests: Chromium is not on this machine (Debian: apt-get install chromium)';
		console.log(`── ${reason}${CI ? ', and in CI that is a failure' : ', left out'}`);
		if (CI) total.failed += 1;
		return;
	}
	const path = join(scratch, 'playwright.json');
	const code = await run('playwright', ['test', '--config', 'tests/browser/playwright.config.ts'], {
		CHROMIUM_PATH: chromium,
		PLAYWRIGHT_JSON_OUTPUT_NAME: path
	});
	const stats = readReport(path)?.stats as Record<string, unknown> | undefined;
	const count: Count = {
		passed: number(stats?.expected),
		failed: number(stats?.unexpected) + number(stats?.flaky),
		skipped: number(stats?.skipped)
	};
	if (code !== 0 && count.failed === 0) count.failed = 1;
	add('browser tests', count, startedAt);
}

await check('SvelteKit types', 'svelte-kit', ['sync']);
// Two cores: types are checked while the other two look at the text.
await Promise.all([
	check('types', 'svelte-check', ['--tsconfig', './tsconfig.json', '--fail-on-warnings']),
	check('format', 'prettier', ['--check', '--log-level', 'warn', '.']).then(() =>
		check('lint', 'eslint', ['--config', '.config/eslint.config.js', '.'])
	)
]);
await unitTests();
const application = await check('build of the application', 'vite', ['build', '--logLevel', 'warn']);
const programs = await check('build of the programs', 'vite', [
	'build',
	'--mode',
	'node-programs',
	'--logLevel',
	'warn'
]);
if (application && programs) await browserTests();

rmSync(scratch, { recursive: true, force: true });
const skipped = total.skipped > 0 ? `, ${total.skipped} skipped` : '';
console.log(`\n${total.passed} passed, ${total.failed} failed${skipped}`);
process.exitCode = total.failed === 0 ? 0 : 1;
