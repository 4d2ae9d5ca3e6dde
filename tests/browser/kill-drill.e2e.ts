import { mkdtempSync, readFileSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { expect, test } from '@playwright/test';
import { catchwater, serve, stop, tokenIn } from './served';

/** The seeded short form: the long drill repeats the same two hundred times. */
const ROUNDS = 3;
const WRITERS = 4;
const PLAN = readFileSync('tests/fixtures/uploads/plan.json');

/** A fixed sequence, so that a failing round can be run again. */
function* delays(): Generator<number> {
	let state = 20_261_201;
	while (true) {
		state = (state * 48_271) % 2_147_483_647;
		yield 120 + (state % 700);
	}
}

/** Logs incidents with a plan, one after the other, until the server is gone. */
async function writeUntilKilled(
	origin: string,
	token: string,
	name: string,
	acknowledged: Map<number, string>
) {
	for (let i = 0; ; i++) {
		const title = `${name}, overflow ${i}`;
		const form = new FormData();
		form.set('incident', JSON.stringify({ title, narrative: `Written by ${name}.` }));
		form.append('evidence', new Blob([PLAN, `\n\n${' '.repeat(i)}`]), 'plan.json');
		const answer = await fetch(`${origin}/api/v1/incidents`, {
			method: 'POST',
			headers: { authorization: `Bearer ${token}` },
			body: form
		})
			.then(async (response) =>
				response.status === 201 ? ((await response.json()) as { number: number }) : null
			)
			.catch(() => null);
		if (answer === null) return;
		acknowledged.set(answer.number, title);
	}
}

test('everything acknowledged is there after kill -9 in the middle of writing', async () => {
	test.setTimeout(120_000);
	const folder = mkdtempSync(join(tmpdir(), 'catchwater-kill-'));
	try {
		expect(catchwater(folder, 'migrate').code).toBe(0);
		const added = ['--email', 'drill@northmoor.example', '--name', 'Drill', '--role', 'responder'];
		expect(catchwater(folder, 'add-person', ...added).code).toBe(0);
		const made = catchwater(
			folder,
			'token',
			'--email',
			'drill@northmoor.example',
			'--name',
			'drill',
			'--role',
			'responder'
		);
		const token = tokenIn(made.output);
		const acknowledged = new Map<number, string>();
		const pauses = delays();
		for (let round = 0; round < ROUNDS; round++) {
			const served = await serve(folder);
			const writers = Array.from({ length: WRITERS }, (_, i) =>
				writeUntilKilled(served.origin, token, `round ${round} writer ${i}`, acknowledged)
			);
			const before = acknowledged.size;
			while (acknowledged.size < before + WRITERS) await new Promise((resolve) => setTimeout(resolve, 20));
			await new Promise((resolve) => setTimeout(resolve, pauses.next().value));
			await stop(served, 'SIGKILL');
			await Promise.all(writers);
		}

		const served = await serve(folder);
		expect(acknowledged.size).toBeGreaterThanOrEqual(ROUNDS * WRITERS);
		for (const [number, title] of acknowledged) {
			const response = await fetch(`${served.origin}/api/v1/incidents/${number}`, {
				headers: { authorization: `Bearer ${token}` }
			});
			const incident = (await response.json()) as { title: string; evidence: { sha256: string }[] };
			expect(incident.title).toBe(title);
			expect(incident.evidence).toHaveLength(1);
			const file = await fetch(`${served.origin}/api/v1/evidence/${incident.evidence[0]?.sha256}`, {
				headers: { authorization: `Bearer ${token}` }
			});
			expect(file.status).toBe(200);
		}
		expect(await stop(served)).toBe(0);
		const checked = catchwater(folder, 'check');
		expect(checked.output).toContain('no fault');
		expect(checked.code, checked.output).toBe(0);
	} finally {
		rmSync(folder, { recursive: true, force: true });
	}
});
