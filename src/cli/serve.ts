import { existsSync } from 'node:fs';
import { createServer } from 'node:net';
import { fileURLToPath } from 'node:url';
import {
	config,
	ConfigError,
	handToServer,
	isLoopback,
	overrideConfig,
	type Config
} from '$lib/server/config';
import { closeDatabase } from '$lib/server/db/connection';
import { lockFolder } from '$lib/server/db/folder-lock';
import { isForeign, listDemoSignIns, prepareDemo } from './demo-folder';
import { readArgs, UsageError } from './verb';

const HELP = `Usage: npm start [-- --demo]

Starts the built Catchwater on HOST and PORT with the data folder DATA_DIR. With --demo, fills an empty folder
(./data/demo unless DATA_DIR names one) with the demonstration first, and prints a sign-in for each role.`;

const DEMO_FOLDER = './data/demo';

/** The start cannot go on; its message is the one line that says why. */
class StartError extends Error {}

/** Fails before anything is opened where somebody listens already: the adapter would only print a stack. */
function requireFreePort({ host, port }: Config): Promise<void> {
	return new Promise((resolve, reject) => {
		const probe = createServer();
		probe.once('error', (error: Error & { code?: string }) => {
			const reason = error.code === 'EADDRINUSE' ? 'another program listens there' : error.message;
			reject(new StartError(`PORT: ${host}:${port} cannot be used: ${reason}.`));
		});
		probe.listen(port, host, () => probe.close(() => resolve()));
	});
}

function refuseFolder({ dataDir }: Config): string {
	return `DATA_DIR: ${dataDir} holds something other than the demonstration.`;
}

/** Fills or takes the demonstration; answers the lines that tell how to sign in. */
async function prepare(settings: Config): Promise<string[]> {
	console.log(`Demonstration in ${settings.dataDir}: a moment, please …`);
	overrideConfig({ logLevel: 'silent' });
	const result = await prepareDemo(settings.dataDir);
	if (result === null) throw new StartError(refuseFolder(settings));
	const signIns = await listDemoSignIns();
	await closeDatabase();
	if (!isLoopback(settings.host)) {
		return ['The demonstration’s passwords work only while HOST is a loopback address, such as 127.0.0.1.'];
	}
	return [
		'Sign in as',
		...signIns.map(({ role, email, password }) => `  ${role.padEnd(14)} ${email}   ${password}`)
	];
}

async function serve(args: string[]): Promise<void> {
	const { values } = readArgs({ args, options: { demo: { type: 'boolean' }, help: { type: 'boolean' } } });
	if (values.help) {
		console.log(HELP);
		return;
	}
	const settings = config(values.demo ? { DATA_DIR: DEMO_FOLDER } : {});
	const server = new URL('../index.js', import.meta.url);
	if (!existsSync(fileURLToPath(server)))
		throw new StartError('Nothing is built yet: run "npm run build" first.');
	await requireFreePort(settings);
	// Before the lock, which would leave a file in somebody else's folder.
	if (values.demo && (await isForeign(settings.dataDir))) throw new StartError(refuseFolder(settings));
	const lock = await lockFolder(settings.dataDir);
	if (!lock) throw new StartError(`DATA_DIR: another Catchwater runs on ${settings.dataDir}.`);
	const lines = values.demo ? await prepare(settings) : [];
	handToServer(settings);
	await import(/* @vite-ignore */ server.href);
	console.log([`Catchwater is at ${settings.origin}`, ...lines, 'Ctrl+C stops it.'].join('\n'));
}

try {
	await serve(process.argv.slice(2));
} catch (error) {
	if (!(error instanceof StartError || error instanceof ConfigError || error instanceof UsageError))
		throw error;
	console.error(error.message);
	process.exit(error instanceof UsageError ? 2 : 1);
}
