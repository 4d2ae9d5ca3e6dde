import { createWriteStream, openAsBlob } from 'node:fs';
import { mkdtemp, readFile, rm } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import path from 'node:path';
import { pipeline } from 'node:stream/promises';
import { z } from 'zod';
import { readArgs, readOptions, UsageError, type Verb } from '../verb';

const HELP = `Usage: catchwater send-evidence --url URL (--token TOKEN | --token-file FILE) [--incident N] FILE…

Sends plans and logs to a Catchwater at URL, such as https://catchwater.example.org, and prints what was read
out of each. "-" is standard input. With --incident they are attached to that incident, else they stand alone.
A token on the command line is seen by others on this machine: --token-file keeps it to yourself.`;

const options = z.object({
	url: z.url({ protocol: /^https?$/, error: 'give an address that begins with http:// or https://' }),
	token: z.string().startsWith('cw_', 'give a token, which begins with cw_').optional(),
	'token-file': z.string().optional(),
	incident: z.string().regex(/^\d+$/, "give the incident's number").optional()
});

/** What the answer says of each piece, as far as it is printed. */
const answer = z.object({
	items: z.array(
		z.object({
			name: z.string(),
			format: z.string(),
			state: z.string(),
			readings: z.array(z.object({ symptoms: z.array(z.object({ summary: z.string() })) }))
		})
	)
});
const problem = z.object({ detail: z.string() });

interface Target {
	url: URL;
	token: string;
	incident: string | undefined;
}

async function readToken(values: z.infer<typeof options>): Promise<string> {
	if (values.token !== undefined) return values.token;
	if (values['token-file'] === undefined) throw new UsageError('Give --token or --token-file.');
	return (await readFile(values['token-file'], 'utf8')).trim();
}

function describe(text: string): string {
	const { items } = answer.parse(JSON.parse(text));
	return items
		.map(({ name, format, state, readings }) => {
			const symptoms = readings.flatMap((reading) => reading.symptoms.map(({ summary }) => `  ${summary}`));
			return [`${name}: ${state === 'read' ? format : state}`, ...symptoms].join('\n');
		})
		.join('\n');
}

/** Sends one file as it lies on the disk, without holding it in memory. */
async function send(target: Target, file: string, name: string): Promise<string> {
	const form = new FormData();
	if (target.incident !== undefined) form.append('incident', target.incident);
	form.append('evidence', await openAsBlob(file), name);
	const response = await fetch(new URL('/api/v1/evidence', target.url), {
		method: 'POST',
		headers: { authorization: `Bearer ${target.token}` },
		body: form
	});
	const text = await response.text();
	if (response.ok) return describe(text);
	const isProblem = response.headers.get('content-type')?.startsWith('application/problem+json');
	throw new Error(isProblem ? problem.parse(JSON.parse(text)).detail : `status ${response.status}`);
}

/** Standard input, whose length nobody knows, goes through a file of its own. */
async function sendInput(target: Target): Promise<string> {
	const folder = await mkdtemp(path.join(tmpdir(), 'catchwater-'));
	try {
		const file = path.join(folder, 'input');
		await pipeline(process.stdin, createWriteStream(file, { mode: 0o600 }));
		return await send(target, file, 'standard input');
	} finally {
		await rm(folder, { recursive: true, force: true });
	}
}

/** What went wrong with one file, in a line: fetch hides the reason in `cause`. */
function reasonOf(error: unknown): string {
	if (!(error instanceof Error)) return String(error);
	return error.cause instanceof Error ? `${error.message}: ${error.cause.message}` : error.message;
}

export const sendEvidence: Verb = {
	help: HELP,
	async run(args) {
		const text = { type: 'string' } as const;
		const { values, positionals } = readArgs({
			args,
			allowPositionals: true,
			options: { url: text, token: text, 'token-file': text, incident: text }
		});
		const checked = readOptions(options, values);
		if (positionals.length === 0) throw new UsageError('Name at least one file, or "-".');
		const target = { url: new URL(checked.url), token: await readToken(checked), incident: checked.incident };
		let exitCode = 0;
		for (const file of positionals) {
			try {
				const said = file === '-' ? await sendInput(target) : await send(target, file, path.basename(file));
				console.log(said);
			} catch (error) {
				// One file that fails keeps none of the others back.
				console.error(`${file}: ${reasonOf(error)}`);
				exitCode = 1;
			}
		}
		return exitCode;
	}
};
