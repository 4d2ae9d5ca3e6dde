import { ConfigError } from '$lib/server/config';
import { UsageError, type Verb } from './verb';

/** Each verb is loaded when it is asked for: sending a file needs no database. */
const VERBS: Record<string, { summary: string; load: () => Promise<Verb> }> = {
	migrate: {
		summary: 'bring the tables of the data folder up to date',
		load: async () => (await import('./verbs/migrate')).migrate
	},
	demo: {
		summary: 'fill an empty data folder with the demonstration',
		load: async () => (await import('./verbs/demo')).demo
	},
	'add-person': {
		summary: 'add a person and print their sign-in link',
		load: async () => (await import('./verbs/add-person')).addPerson
	},
	token: {
		summary: "make a token for a person's program and print it once",
		load: async () => (await import('./verbs/token')).token
	},
	check: {
		summary: 'check database, evidence files and index of the data folder',
		load: async () => (await import('./verbs/check')).check
	},
	reindex: {
		summary: 'build the search index and the precedents anew',
		load: async () => (await import('./verbs/reindex')).reindex
	},
	reread: {
		summary: 'read all stored evidence again, after the readers improved',
		load: async () => (await import('./verbs/reread')).reread
	},
	'send-evidence': {
		summary: 'send plans and logs to a Catchwater over HTTP',
		load: async () => (await import('./verbs/send-evidence')).sendEvidence
	}
};

function listVerbs(): string {
	const lines = Object.entries(VERBS).map(([name, { summary }]) => `  ${name.padEnd(14)} ${summary}`);
	return ['Usage: catchwater <verb> [options]', '', ...lines, '', '--help after a verb says more.'].join(
		'\n'
	);
}

/** Runs a verb; what was typed wrongly and wrong settings end in a line, not in a stack. */
async function runVerb(verb: Verb, args: string[]): Promise<number> {
	if (args.includes('--help')) {
		console.log(verb.help);
		return 0;
	}
	try {
		return await verb.run(args);
	} catch (error) {
		if (error instanceof UsageError) {
			console.error(`${error.message}\n\n${verb.help}`);
			return 2;
		}
		if (error instanceof ConfigError) {
			console.error(error.message);
			return 1;
		}
		throw error;
	}
}

/** Answers the exit code: 0, 1 for a fault, 2 for what was typed wrongly. */
async function main(args: string[]): Promise<number> {
	const [name, ...rest] = args;
	if (name === undefined || name === '--help' || name === 'help') {
		console.log(listVerbs());
		return name === undefined ? 2 : 0;
	}
	const found = Object.hasOwn(VERBS, name) ? VERBS[name] : undefined;
	if (found) return runVerb(await found.load(), rest);
	console.error(`There is no verb "${name}".\n\n${listVerbs()}`);
	return 2;
}

process.exitCode = await main(process.argv.slice(2));
