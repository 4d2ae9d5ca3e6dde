import { existsSync } from 'node:fs';
import path from 'node:path';
import { Worker } from 'node:worker_threads';
import type { EvidenceRead } from '../../domain/reading/read-evidence';
import type { PoolAnswer, PoolAsk } from './pool-messages';
import { readEvidenceFile, type FileToRead } from './read-file';

/** Workers at once: reading must leave a processor to the requests. One stays when all is quiet. */
const MOST_WORKERS = 2;
const IDLE_MS = 30_000;
/** A plan of the largest size allowed needs less; a worker that wants more is stopped, the server lives on. */
const WORKER_MEMORY_MB = 1024;

interface Task {
	file: FileToRead;
	resolve(read: EvidenceRead): void;
	reject(error: Error): void;
}

interface Member {
	worker: Worker;
	task: Task | null;
	timer: NodeJS.Timeout | null;
}

const waiting: Task[] = [];
const members = new Set<Member>();
let lastId = 0;

/**
 * Masks and reads a file in a worker, so that no evidence holds up a request. `maskedPath` must not exist yet; null
 * reads alone. Rejects when the disk fails or the worker ran out of memory, never for what the file holds.
 */
export function readFile(rawPath: string, name: string, maskedPath: string | null): Promise<EvidenceRead> {
	const file: FileToRead = { rawPath, name, maskedPath };
	const script = workerScript();
	// From source (development, tests) there is no built worker; reading then happens here.
	if (script === null) return readEvidenceFile(file);
	return new Promise((resolve, reject) => {
		waiting.push({ file, resolve, reject });
		dispatch(script);
	});
}

/** Starts the first worker, so that the first upload doesn't wait for it. */
export function warmUp(): void {
	const script = workerScript();
	if (script !== null && members.size === 0) start(script);
}

/** Stops all workers; files that are being read are given up. */
export async function closePool(): Promise<void> {
	await Promise.all([...members].map(({ worker }) => worker.terminate()));
}

/** Beside the program that runs, or in the build of the folder that it was started in. */
function workerScript(): string | null {
	if (import.meta.env?.PROD !== true) return null;
	const folders = [path.dirname(process.argv[1] ?? ''), path.resolve('build/node')];
	return (
		folders.map((folder) => path.join(folder, 'reading-worker.js')).find((file) => existsSync(file)) ?? null
	);
}

function dispatch(script: string): void {
	while (waiting.length > 0) {
		const member =
			[...members].find(({ task }) => task === null) ?? (members.size < MOST_WORKERS ? start(script) : null);
		if (member === null) return;
		const task = waiting.shift();
		if (task === undefined) return;
		give(member, task);
	}
}

function give(member: Member, task: Task): void {
	if (member.timer !== null) clearTimeout(member.timer);
	member.timer = null;
	member.task = task;
	member.worker.ref();
	const ask: PoolAsk = { id: ++lastId, file: task.file };
	member.worker.postMessage(ask);
}

function start(script: string): Member {
	const worker = new Worker(script, { resourceLimits: { maxOldGenerationSizeMb: WORKER_MEMORY_MB } });
	const member: Member = { worker, task: null, timer: null };
	members.add(member);
	worker.unref();
	worker.on('message', (answer: PoolAnswer) => {
		const { task } = member;
		rest(member);
		if (task !== null) settle(task, answer);
		dispatch(script);
	});
	worker.on('error', (error) => leave(member, error, script));
	worker.on('exit', () => leave(member, new Error('The reading worker stopped.'), script));
	return member;
}

function settle(task: Task, answer: PoolAnswer): void {
	if ('read' in answer) task.resolve(answer.read);
	else
		task.reject(Object.assign(new Error(answer.failed.message), { code: answer.failed.code ?? undefined }));
}

/** An idle worker keeps no program alive, and all but one go after a while. */
function rest(member: Member): void {
	member.task = null;
	member.worker.unref();
	member.timer = setTimeout(() => {
		if (members.size > 1 && member.task === null) void member.worker.terminate();
	}, IDLE_MS);
	member.timer.unref();
}

function leave(member: Member, error: Error, script: string): void {
	if (!members.delete(member)) return;
	if (member.timer !== null) clearTimeout(member.timer);
	member.task?.reject(error);
	member.task = null;
	dispatch(script);
}
