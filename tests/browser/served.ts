/**
 * The built server and the built command line as a test starts them: on a folder of its own, on a port of
 * its own, stopped or killed when the test says so.
 */
import { spawn, spawnSync, type ChildProcess } from 'node:child_process';
import { createServer } from 'node:net';

const SERVE = 'build/node/serve.js';
const CATCHWATER = 'build/node/catchwater.js';
const START_LIMIT_MS = 30_000;
const DEMO_LIMIT_MS = 180_000;

export interface Served {
	origin: string;
	process: ChildProcess;
	/** What the server wrote on both streams so far. */
	output: () => string;
}

/** A port that nobody listens on now. */
export function freePort(): Promise<number> {
	return new Promise((resolve, reject) => {
		const probe = createServer();
		probe.on('error', reject);
		probe.listen(0, '127.0.0.1', () => {
			const address = probe.address();
			const port = typeof address === 'object' && address !== null ? address.port : 0;
			probe.close(() => resolve(port));
		});
	});
}

/**
 * Starts the built server on a folder and waits for its health to be good; `demo` fills the folder first.
 * Throws with the server's output where it does not start.
 */
export async function serve(dataDir: string, options: { demo?: boolean } = {}): Promise<Served> {
	const port = await freePort();
	const origin = `http://127.0.0.1:${port}`;
	const child = spawn(process.execPath, options.demo ? [SERVE, '--demo'] : [SERVE], {
		env: { ...process.env, DATA_DIR: dataDir, HOST: '127.0.0.1', PORT: String(port), ORIGIN: origin },
		stdio: ['ignore', 'pipe', 'pipe']
	});
	let output = '';
	child.stdout.on('data', (chunk: Buffer) => (output += chunk.toString()));
	child.stderr.on('data', (chunk: Buffer) => (output += chunk.toString()));
	const until = Date.now() + (options.demo ? DEMO_LIMIT_MS : START_LIMIT_MS);
	while (Date.now() < until) {
		if (child.exitCode !== null) break;
		const answered = await fetch(`${origin}/api/v1/health`).then(
			(response) => response.ok,
			() => false
		);
		if (answered) return { origin, process: child, output: () => output };
		await new Promise((resolve) => setTimeout(resolve, 100));
	}
	child.kill('SIGKILL');
	throw new Error(`The server did not start:\n${output}`);
}

/** Sends a signal and waits for the end; answers the exit code, null where a signal ended it. */
export function stop(
	served: Served,
	signal: 'SIGTERM' | 'SIGINT' | 'SIGKILL' = 'SIGTERM'
): Promise<number | null> {
	return new Promise((resolve) => {
		if (served.process.exitCode !== null) resolve(served.process.exitCode);
		served.process.once('exit', (code) => resolve(code));
		served.process.kill(signal);
	});
}

/** Runs the built command line on a folder. */
export function catchwater(dataDir: string, ...args: string[]): { code: number | null; output: string } {
	const ran = spawnSync(process.execPath, [CATCHWATER, ...args], {
		env: { ...process.env, DATA_DIR: dataDir },
		encoding: 'utf8'
	});
	return { code: ran.status, output: `${ran.stdout}${ran.stderr}` };
}

/** The token in what `catchwater token` prints. Throws with the output where there is none. */
export function tokenIn(output: string): string {
	const token = /cw_[\w-]+/.exec(output)?.[0];
	if (token === undefined) throw new Error(`No token was printed:\n${output}`);
	return token;
}
