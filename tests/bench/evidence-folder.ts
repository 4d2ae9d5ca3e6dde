import { createReadStream, existsSync, readdirSync, readFileSync } from 'node:fs';
import path from 'node:path';
import { parse } from 'yaml';
import { readEvidence } from '$lib/domain/reading/read-evidence';
import type { Severity } from '$lib/domain/incident/incident';
import type { Reading } from '$lib/domain/reading/reading';

/** One incident of a folder in the evidence format: a case with its files, or a distractor without any. */
export interface FolderIncident {
	id: string;
	title: string;
	service: string | null;
	startedAt: string | null;
	resolvedAt: string | null;
	severity: Severity;
	narrative: string;
	resolution: string;
	/** Paths of the evidence that an engineer would have had at night. */
	files: string[];
}

/** Grades of relevance: of a query case, by other case. What is not listed is 0. */
export type Relevance = Record<string, Record<string, number>>;

/** What is no evidence of the night: truth, texts, and what was saved after the fix. */
const NOT_EVIDENCE = /^(?:case\.json|narrative\.md|resolution\.md|query\.sql|after\..*)$/;

/** Cases in order of their ids, then the distractors. */
export function readFolder(folder: string): { incidents: FolderIncident[]; relevance: Relevance } {
	const cases = path.join(folder, 'cases');
	const incidents = readdirSync(cases)
		.filter((id) => existsSync(path.join(cases, id, 'narrative.md')))
		.sort()
		.map((id) => readCase(path.join(cases, id), id));
	const distractors = path.join(folder, 'distractors.jsonl');
	if (existsSync(distractors)) incidents.push(...readDistractors(distractors));
	const relevance: Relevance = JSON.parse(readFileSync(path.join(folder, 'relevance.json'), 'utf8'));
	return { incidents, relevance };
}

function readCase(folder: string, id: string): FolderIncident {
	const text = readFileSync(path.join(folder, 'narrative.md'), 'utf8');
	const [, head = '', narrative = text] = /^---\r?\n([\s\S]*?)\r?\n---\r?\n([\s\S]*)$/.exec(text) ?? [];
	const front: Record<string, unknown> = parse(head) ?? {};
	const resolution = path.join(folder, 'resolution.md');
	return {
		id,
		...readFields(front),
		narrative,
		resolution: existsSync(resolution) ? readFileSync(resolution, 'utf8') : '',
		files: readdirSync(folder)
			.filter((name) => !NOT_EVIDENCE.test(name))
			.sort()
			.map((name) => path.join(folder, name))
	};
}

function readDistractors(file: string): FolderIncident[] {
	return readFileSync(file, 'utf8')
		.split('\n')
		.filter((line) => line.trim() !== '')
		.map((line) => {
			const row: Record<string, unknown> = JSON.parse(line);
			return {
				id: String(row.id),
				...readFields(row),
				narrative: String(row.narrative ?? ''),
				resolution: String(row.resolution ?? ''),
				files: []
			};
		});
}

function readFields(row: Record<string, unknown>) {
	return {
		title: String(row.title ?? ''),
		service: typeof row.service === 'string' ? row.service : null,
		startedAt: toUtc(row.startedAt),
		resolvedAt: toUtc(row.resolvedAt),
		severity: toSeverity(row.severity)
	};
}

function toSeverity(value: unknown): Severity {
	return value === 1 || value === 2 || value === 4 ? value : 3;
}

function toUtc(value: unknown): string | null {
	const time = value instanceof Date ? value.getTime() : Date.parse(String(value));
	return Number.isNaN(time) ? null : new Date(time).toISOString();
}

/** The readings of an incident's evidence, file by file. */
export async function readFiles(files: readonly string[]): Promise<{ name: string; readings: Reading[] }[]> {
	const read = [];
	for (const file of files) {
		const name = path.basename(file);
		read.push({ name, readings: await readEvidence(createReadStream(file), name) });
	}
	return read;
}
