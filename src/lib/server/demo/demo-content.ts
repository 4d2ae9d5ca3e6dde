import { readdir, readFile } from 'node:fs/promises';
import path from 'node:path';
import { parse } from 'yaml';
import { z } from 'zod';
import { OUTCOMES } from '$lib/domain/incident/attempt';
import { INCIDENT_STATES } from '$lib/domain/incident/incident';
import { readFrontMatter } from '$lib/domain/markdown/front-matter';
import { ROLES } from '$lib/domain/person/person';
import { ENGINES } from '$lib/domain/reading/reading';

/** Minutes after the incident began. */
const minute = z.number().int().min(0);
const personKey = z.string().regex(/^[a-z]+$/);
const fileName = z.string().regex(/^[\w.-]+$/);

const demoPerson = z.strictObject({
	key: personKey,
	name: z.string().min(1),
	email: z.email(),
	role: z.enum(ROLES),
	/** Slugs of the runbooks that the person looks after. */
	runbooks: z.array(z.string()).default([])
});
export type DemoPerson = z.infer<typeof demoPerson>;

const demoEvidence = z.strictObject({
	file: fileName,
	at: minute,
	by: personKey.optional(),
	/** When the story that the file was written in began: its time stamps are moved to this incident's. */
	recordedAt: z.iso.datetime({ offset: true }).optional()
});
export type DemoEvidence = z.infer<typeof demoEvidence>;

const demoAttempt = z.strictObject({
	at: minute,
	by: personKey,
	/** Slug; left out: a free action with a title. */
	runbook: z.string().optional(),
	title: z.string().optional(),
	/** How long it took; left out while it is under way. */
	minutes: minute.optional(),
	outcome: z.enum(OUTCOMES).nullable(),
	note: z.string(),
	before: fileName.optional(),
	after: fileName.optional(),
	skipped: z.array(z.strictObject({ step: z.number().int(), why: z.string() })).default([]),
	/** Steps ticked so far, of one under way. */
	ticked: z.number().int().optional()
});
export type DemoAttempt = z.infer<typeof demoAttempt>;

const demoIncident = z.strictObject({
	title: z.string().min(1),
	service: z.string(),
	database: z.string(),
	engine: z.enum(ENGINES),
	engineVersion: z.string().optional(),
	severity: z.number().int().min(1).max(4),
	state: z.enum(INCIDENT_STATES),
	loggedBy: personKey,
	owner: personKey.nullable(),
	/** One of the two: a time of its own, or so long before the folder is filled. */
	startedAt: z.iso.datetime({ offset: true }).optional(),
	startedMinutesAgo: minute.optional(),
	detected: minute,
	contained: minute.optional(),
	resolved: minute.optional(),
	cause: z.string().optional(),
	labels: z.array(z.string()).default([]),
	evidence: z.array(demoEvidence).default([]),
	entries: z.array(z.strictObject({ at: minute, by: personKey, text: z.string() })).default([]),
	attempts: z.array(demoAttempt).default([])
});

/** An incident of the demonstration, as its folder tells it. */
export interface DemoIncident extends z.infer<typeof demoIncident> {
	narrative: string;
	/** null: not over yet. */
	resolution: string | null;
	/** Absolute path of its folder. */
	folder: string;
}

export interface DemoContent {
	people: DemoPerson[];
	/** In the order in which they are logged. */
	incidents: DemoIncident[];
}

/** Where the demonstration lies, seen from the application's own folder. */
export const DEMO_CONTENT = path.join('content', 'demo');

async function readText(file: string): Promise<string | null> {
	try {
		return await readFile(file, 'utf8');
	} catch (error) {
		if (error instanceof Error && 'code' in error && error.code === 'ENOENT') return null;
		throw error;
	}
}

async function readIncident(folder: string): Promise<DemoIncident> {
	const text = await readText(path.join(folder, 'incident.md'));
	const split = readFrontMatter(text ?? '');
	if (!split.ok) throw new Error(`${folder}: ${split.problem.detail}`);
	const parsed = demoIncident.safeParse(split.value.data);
	if (!parsed.success) throw new Error(`${folder}: ${z.prettifyError(parsed.error)}`);
	return {
		...parsed.data,
		narrative: split.value.body,
		resolution: await readText(path.join(folder, 'resolution.md')),
		folder
	};
}

/**
 * Reads the demonstration from the application's folder. Throws where it does not fit its schema: it is our
 * own text, and a test reads it.
 */
export async function readDemoContent(root: string = path.resolve(DEMO_CONTENT)): Promise<DemoContent> {
	const people = z.array(demoPerson).parse(parse(await readFile(path.join(root, 'people.yaml'), 'utf8')));
	const folders = (await readdir(path.join(root, 'incidents'))).sort();
	const incidents: DemoIncident[] = [];
	for (const name of folders) incidents.push(await readIncident(path.join(root, 'incidents', name)));
	return { people, incidents };
}
