/**
 * `npm run bench:readings -- DIR`: what readings say of a folder in the evidence format, held to its truth.
 *
 * Symptoms are counted twice: file by file against the musts that this file alone shows, and case by case with all
 * files of a case taken together. A must that is missing is a miss; a symptom that is neither a must nor among those
 * that may be reported too is a false alarm. "told-in-words" rests on the narrative alone and is not counted.
 */
import { readFileSync } from 'node:fs';
import path from 'node:path';
import { findToldInWords } from '$lib/domain/symptom/told-in-words';
import { readCases, type ReadCase } from './evidence-truth';

const NEVER_COUNTED = 'told-in-words';
/** Bounds of the project for unseen evidence. */
const BOUNDS = {
	recall: 0.97,
	precision: 0.97,
	causeFirst: 0.8,
	causeInTwo: 0.95,
	sizingMedian: 0.15,
	sizingP95: 0.3
};

class Tally {
	private readonly rows = new Map<string, { hit: number; missed: number; alarm: number }>();
	readonly faults: string[] = [];

	count(
		where: string,
		reported: ReadonlySet<string>,
		musts: readonly string[],
		allowed: ReadonlySet<string>
	): void {
		for (const id of musts) {
			if (id === NEVER_COUNTED) continue;
			if (reported.has(id)) this.row(id).hit++;
			else {
				this.row(id).missed++;
				this.faults.push(`miss         ${id.padEnd(26)} ${where}`);
			}
		}
		for (const id of reported) {
			if (id === NEVER_COUNTED || musts.includes(id) || allowed.has(id)) continue;
			this.row(id).alarm++;
			this.faults.push(`false alarm  ${id.padEnd(26)} ${where}`);
		}
	}

	print(title: string): void {
		const all = { hit: 0, missed: 0, alarm: 0 };
		console.log(`\n${title.padEnd(32)} musts  recall  precision  misses  false alarms`);
		for (const [id, row] of [...this.rows].sort(([one], [other]) => one.localeCompare(other))) {
			printRow(id, row);
			all.hit += row.hit;
			all.missed += row.missed;
			all.alarm += row.alarm;
		}
		printRow('all (micro)', all);
		console.log(`bounds: recall >= ${BOUNDS.recall}, precision >= ${BOUNDS.precision}`);
		for (const fault of this.faults) console.log(fault);
	}

	private row(id: string) {
		const row = this.rows.get(id) ?? { hit: 0, missed: 0, alarm: 0 };
		this.rows.set(id, row);
		return row;
	}
}

function printRow(id: string, { hit, missed, alarm }: { hit: number; missed: number; alarm: number }): void {
	const musts = hit + missed;
	const recall = musts === 0 ? '-' : (hit / musts).toFixed(3);
	const precision = hit + alarm === 0 ? '-' : (hit / (hit + alarm)).toFixed(3);
	console.log(
		`${id.padEnd(32)} ${String(musts).padStart(5)}  ${recall.padStart(6)}  ${precision.padStart(9)}  ${String(missed).padStart(6)}  ${String(alarm).padStart(12)}`
	);
}

/** Symptoms of one file; null: its format is not read, or it holds no plan. */
function symptomsOf(file: ReadCase['files'][number]): Set<string> | null {
	const plans = file.readings.filter((reading) => reading.plan !== null);
	return plans.length === 0
		? null
		: new Set(plans.flatMap((reading) => reading.symptoms.map((each) => each.id)));
}

function isMeasured(file: ReadCase['files'][number]): boolean {
	const said = symptomsOf(file);
	return said !== null && !said.has('no-runtime-figures');
}

function tallySymptoms(cases: readonly ReadCase[]): void {
	const byFile = new Tally();
	const byCase = new Tally();
	const healthyWithAlarm = new Set<string>();
	for (const { truth, files } of cases) {
		const together = new Set<string>();
		const allowed = new Set([...truth.mayAlso, ...truth.symptoms]);
		for (const file of files) {
			const reported = symptomsOf(file);
			if (reported === null) continue;
			for (const id of reported) together.add(id);
			byFile.count(`${truth.id} ${file.name}`, reported, truth.symptomsBySource[file.name] ?? [], allowed);
		}
		// Said of a file that holds estimates only; beside another with figures it says nothing of the case.
		if (files.some((file) => isMeasured(file))) together.delete('no-runtime-figures');
		byCase.count(truth.id, together, truth.symptoms, new Set(truth.mayAlso));
		if (truth.cause === 'healthy' && together.size > 0) healthyWithAlarm.add(truth.id);
	}
	byFile.print('symptoms, file by file');
	byCase.print('symptoms, case by case');
	const healthy = cases.filter(({ truth }) => truth.cause === 'healthy').length;
	console.log(
		`\nhealthy cases with any symptom: ${healthyWithAlarm.size} of ${healthy} ${[...healthyWithAlarm].join(' ')}`
	);
}

function tallyCauses(cases: readonly ReadCase[]): void {
	const ill = cases.filter(({ truth }) => truth.likelyCauses.length > 0);
	let first = 0;
	let inTwo = 0;
	const faults: string[] = [];
	for (const { truth, files } of ill) {
		// One plan saved in several forms: the causes of the first that names any.
		const named =
			files.flatMap((file) => file.readings).find((reading) => reading.causes.length > 0)?.causes ?? [];
		const meant = truth.likelyCauses[0];
		const place = named.findIndex((cause) => cause.id === meant);
		if (place === 0) first++;
		if (place === 0 || place === 1) inTwo++;
		if (place !== 0) {
			const said = named.slice(0, 3).map((cause) => `${cause.id} ${cause.confidence}`);
			const defensible =
				named[0] !== undefined && truth.likelyCauses.includes(named[0].id) ? '(defensible)' : '';
			faults.push(`${truth.id} meant ${meant}, said ${said.join(', ') || 'nothing'} ${defensible}`);
		}
	}
	console.log(`\nlikely causes over ${ill.length} cases`);
	console.log(`the true one first        ${share(first, ill.length)}  bound ${BOUNDS.causeFirst}`);
	console.log(`within the first two      ${share(inTwo, ill.length)}  bound ${BOUNDS.causeInTwo}`);
	for (const fault of faults) console.log(fault);
	for (const { truth, files } of cases.filter(({ truth: { cause } }) => cause === 'healthy')) {
		const named = files
			.flatMap((file) => file.readings)
			.flatMap((reading) => reading.causes.map((cause) => cause.id));
		if (named.length > 0)
			console.log(`healthy but with a cause: ${truth.id} ${[...new Set(named)].join(', ')}`);
	}
}

function share(count: number, all: number): string {
	return all === 0 ? '-' : (count / all).toFixed(3);
}

function tallySizing(cases: readonly ReadCase[]): void {
	const errors: number[] = [];
	const lines: string[] = [];
	let short = 0;
	for (const { truth, files } of cases) {
		const plan = files.find((file) => file.name === 'plan.json') ?? files[0];
		const sizing = plan?.readings.flatMap((reading) => reading.sizing) ?? [];
		for (const kind of ['hash', 'sort', 'aggregate'] as const) {
			const trueKb = truth.minWorkMemKb[kind];
			if (trueKb === undefined) continue;
			const kb = Math.max(
				0,
				...sizing.filter((each) => each.kind === kind).map((each) => each.setting.valueKb)
			);
			const spillsAtKb = truth.spillsAtKb[kind] ?? 0;
			const error = kb / trueKb - 1;
			if (kb === 0) lines.push(`${truth.id} ${kind.padEnd(10)} not sized`);
			else {
				errors.push(Math.abs(error));
				// The truth lies between the two: at spillsAtKb it still spilled, at trueKb no longer.
				const verdict =
					kb <= spillsAtKb ? 'WOULD STILL SPILL' : kb < trueKb ? 'between the two bisected' : '';
				if (kb <= spillsAtKb) short++;
				lines.push(
					`${truth.id} ${kind.padEnd(10)} ${String(kb).padStart(8)} kB, truth ${String(spillsAtKb).padStart(7)}..${String(trueKb).padEnd(7)} ${(error * 100).toFixed(1).padStart(6)} %  ${verdict}`
				);
			}
		}
	}
	errors.sort((one, other) => one - other);
	console.log(`\nsizing of ${errors.length} spills against the bisected truth`);
	console.log(`median error  ${percent(quantile(errors, 0.5))}  bound ${percent(BOUNDS.sizingMedian)}`);
	console.log(`p95 error     ${percent(quantile(errors, 0.95))}  bound ${percent(BOUNDS.sizingP95)}`);
	console.log(`settings at which it was seen to spill: ${short}`);
	for (const line of lines) console.log(line);
}

/** Nearest-rank quantile of sorted figures. */
function quantile(sorted: readonly number[], at: number): number {
	return sorted[Math.max(0, Math.ceil(sorted.length * at) - 1)] ?? 0;
}

function percent(value: number): string {
	return `${(value * 100).toFixed(1)} %`;
}

function printToldInWords(folder: string, cases: readonly ReadCase[]): void {
	let ill = 0;
	let told = 0;
	const healthyTold: string[] = [];
	for (const { truth } of cases) {
		const text = readFileSync(path.join(folder, 'cases', truth.id, 'narrative.md'), 'utf8');
		const found = findToldInWords(text).length > 0;
		if (truth.cause !== 'healthy') {
			ill++;
			if (found) told++;
		} else if (found) healthyTold.push(truth.id);
	}
	console.log(
		`\ntold in words (not counted): ${told} of ${ill} ill cases; healthy ones: ${healthyTold.join(' ') || 'none'}`
	);
}

async function main(folder: string): Promise<void> {
	const all = await readCases(folder);
	const read = all.filter(({ files }) => files.some((file) => symptomsOf(file) !== null));
	const unread = all.filter((each) => !read.includes(each));
	console.log(
		`${all.length} cases, ${read.length} read, ${unread.length} in formats that are not read yet and not counted`
	);
	for (const { truth } of unread) console.log(`not read: ${truth.id} (${truth.engine})`);
	tallySymptoms(read);
	tallyCauses(read);
	tallySizing(read);
	printToldInWords(folder, all);
}

const folder = process.argv[2];
if (folder === undefined) {
	console.error('Usage: npm run bench:readings -- DIR   (a folder with cases/<id>/case.json)');
	process.exitCode = 2;
} else {
	await main(folder);
}
