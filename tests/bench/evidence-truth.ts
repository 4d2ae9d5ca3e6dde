import { createReadStream, existsSync, readdirSync, readFileSync } from 'node:fs';
import path from 'node:path';
import { readEvidence } from '$lib/domain/reading/read-evidence';
import type { Reading } from '$lib/domain/reading/reading';

/** The parts of a case.json that readings are held to. */
export interface CaseTruth {
	id: string;
	engine: string;
	cause: string;
	likelyCauses: string[];
	/** Must be reported from the case's evidence taken together. */
	symptoms: string[];
	/** Not counted either way. */
	mayAlso: string[];
	/** Musts that one file alone shows. */
	symptomsBySource: Record<string, string[]>;
	minWorkMemKb: Record<string, number>;
	/** Largest work_mem seen to spill; where runs differ, the smallest that was enough once. */
	spillsAtKb: Record<string, number>;
}

/** A case with what was read out of each of its files. */
export interface ReadCase {
	truth: CaseTruth;
	files: { name: string; readings: Reading[] }[];
}

const EVIDENCE = /^(?:plan\..*|server\..*|slow\.log)$/;

/** Reads every case of a folder in the evidence format, in the order of the ids. */
export async function readCases(folder: string): Promise<ReadCase[]> {
	const cases = path.join(folder, 'cases');
	const found: ReadCase[] = [];
	for (const id of readdirSync(cases).sort()) {
		const home = path.join(cases, id);
		if (!existsSync(path.join(home, 'case.json'))) continue;
		const files = [];
		for (const name of readdirSync(home)
			.filter((each) => EVIDENCE.test(each))
			.sort()) {
			files.push({ name, readings: await readEvidence(createReadStream(path.join(home, name)), name) });
		}
		found.push({ truth: readTruth(id, readFileSync(path.join(home, 'case.json'), 'utf8')), files });
	}
	return found;
}

function readTruth(id: string, text: string): CaseTruth {
	const json: unknown = JSON.parse(text);
	const verified = member(json, 'verified');
	return {
		id,
		engine: String(member(json, 'engine')),
		cause: String(member(json, 'cause')),
		likelyCauses: strings(member(json, 'likelyCauses')),
		symptoms: strings(member(json, 'symptoms')),
		mayAlso: strings(member(json, 'mayAlso')),
		symptomsBySource: Object.fromEntries(
			Object.entries(object(member(json, 'symptomsBySource'))).map(([name, ids]) => [name, strings(ids)])
		),
		minWorkMemKb: numbers(member(verified, 'minWorkMemKb')),
		spillsAtKb: {
			...numbers(member(verified, 'stillSpillsAtKb')),
			...numbers(member(member(verified, 'variesBetweenRuns'), 'enoughInOneRunFromKb'))
		}
	};
}

function object(value: unknown): Record<string, unknown> {
	return typeof value === 'object' && value !== null ? Object.fromEntries(Object.entries(value)) : {};
}

function member(value: unknown, name: string): unknown {
	return object(value)[name];
}

function strings(value: unknown): string[] {
	return Array.isArray(value) ? value.map(String) : [];
}

function numbers(value: unknown): Record<string, number> {
	return Object.fromEntries(Object.entries(object(value)).map(([name, number]) => [name, Number(number)]));
}
