/**
 * `npm run bench` runs every subject of this folder, `npm run bench -- <subject>` one.
 * Benches print figures; they are never part of the tests.
 */
import { spawnSync } from 'node:child_process';
import { readdirSync } from 'node:fs';
import { fileURLToPath } from 'node:url';

const folder = fileURLToPath(new URL('.', import.meta.url));
/** These read a folder of evidence and have commands of their own. */
const OWN_COMMAND = ['run', 'readings', 'precedents'];
const subjects = readdirSync(folder)
	.filter((file) => file.endsWith('.bench.ts'))
	.map((file) => file.replace(/\.bench\.ts$/, ''))
	.filter((subject) => !OWN_COMMAND.includes(subject));
const asked = process.argv.slice(2);
const unknown = asked.filter((subject) => !subjects.includes(subject));
if (unknown.length > 0) {
	console.error(`There is no bench "${unknown.join('", "')}". There are: ${subjects.join(', ')}.`);
	process.exit(2);
}
for (const subject of asked.length > 0 ? asked : subjects) {
	const ran = spawnSync('npx', ['tsx', `${folder}${subject}.bench.ts`], { stdio: 'inherit' });
	if (ran.status !== 0) process.exitCode = 1;
}
