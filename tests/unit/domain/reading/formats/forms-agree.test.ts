import { readFileSync } from 'node:fs';
import { describe, expect, test } from 'vitest';
import type { Operator } from '$lib/domain/reading/operator';
import {
	evidenceOf,
	expectedOf,
	operatorAt,
	read,
	shapeOf,
	type EvidenceFixture
} from '../../../../fixtures/evidence-files';

/** One case comes from separate runs: times, and what workers shared out among them, differ a little. */
function comparable(operator: Operator, parallel: boolean): unknown {
	const { selfMs: _self, totalMs: _total, temporaryBytes, memoryKb, children, ...rest } = operator;
	const figures = parallel
		? { temporaryBytes: temporaryBytes === null, memoryKb: memoryKb === null }
		: { temporaryBytes: temporaryBytes === null ? null : Math.round(temporaryBytes / 1e5), memoryKb };
	const rows = parallel ? { name: rest.name, kind: rest.kind, condition: rest.condition } : rest;
	return { ...rows, ...figures, children: children.map((child) => comparable(child, parallel)) };
}

async function rootOf(fixture: EvidenceFixture): Promise<Operator> {
	const root = (await read(readFileSync(fixture.path)))[0]?.plan?.root;
	if (root === undefined) throw new Error(`No plan in ${fixture.path}.`);
	return root;
}

const json = new Map(
	evidenceOf('postgres-json')
		.filter((one) => one.file === 'plan.json')
		.map((one) => [one.name, one])
);
const others = ['postgres-text', 'postgres-yaml', 'postgres-xml'].flatMap((format) =>
	evidenceOf(format).filter(({ file }) =>
		['plan.txt', 'plan.yaml', 'plan.xml', 'plan.pasted.txt'].includes(file)
	)
);

describe('the forms of one plan', () => {
	test.each(others.map((one) => [`${one.format}/${one.name}/${one.file}`, one] as const))(
		'read %s like its JSON form',
		async (_title, fixture) => {
			const first = json.get(fixture.name);
			if (first === undefined) throw new Error(`No JSON form of ${fixture.name}.`);
			const expected = await rootOf(first);
			const parallel = JSON.stringify(shapeOf(expected)).includes('Gather');
			expect(comparable(await rootOf(fixture), parallel)).toEqual(comparable(expected, parallel));
		}
	);
});

/** The figures of case.json, read from the plan by a program that shares nothing with this one. */
describe('postgres-json', () => {
	const facts = (name: string): Record<string, unknown[]> => {
		const value = expectedOf({ format: 'postgres-json', name })['facts'];
		return typeof value === 'object' && value !== null ? { ...value } : {};
	};
	const cases = [...json.values()];

	test.each(
		cases.filter((one) => facts(one.name)['hashes'] !== undefined).map((one) => [one.name, one] as const)
	)('reads the hash tables of %s', async (name, fixture) => {
		const [reading] = await read(readFileSync(fixture.path));
		const hashes = facts(name)['hashes'] ?? [];
		expect(hashes.length).toBeGreaterThan(0);
		for (const hash of hashes) {
			const { path, batches, originalBatches, peakMemoryKb, ownTempWrittenBlocks } = hash as Record<
				string,
				number
			> & { path: string };
			if (reading === undefined) throw new Error('No reading.');
			const build = operatorAt(reading, path);
			const join = operatorAt(reading, path.slice(0, path.lastIndexOf('.')));
			expect(build).toMatchObject({
				kind: 'hash-build',
				batches,
				plannedBatches: originalBatches,
				memoryKb: peakMemoryKb
			});
			// The Hash holds the build side's writes, the join the probe side's.
			expect(((build.temporaryBytes ?? 0) + (join.temporaryBytes ?? 0)) / 8192).toBe(ownTempWrittenBlocks);
		}
	});

	test.each(
		cases.filter((one) => facts(one.name)['tuplestores'] !== undefined).map((one) => [one.name, one] as const)
	)('charges the tuple stores of %s to whoever filled them', async (name, fixture) => {
		const [reading] = await read(readFileSync(fixture.path));
		const stores = facts(name)['tuplestores'] ?? [];
		expect(stores.length).toBeGreaterThan(0);
		for (const store of stores) {
			const { path, ownTempWrittenBlocks } = store as { path: string; ownTempWrittenBlocks: number };
			if (reading === undefined) throw new Error('No reading.');
			expect((operatorAt(reading, path).temporaryBytes ?? 0) / 8192).toBe(ownTempWrittenBlocks);
		}
	});

	test.each(cases.map((one) => [one.name, one] as const))(
		'finds own times in %s that add up',
		async (_name, fixture) => {
			const root = await rootOf(fixture);
			const list: Operator[] = [];
			const stack = [root];
			for (let next = stack.pop(); next !== undefined; next = stack.pop()) {
				list.push(next);
				stack.push(...next.children);
			}
			for (const operator of list) expect(operator.selfMs ?? 0).toBeGreaterThanOrEqual(0);
			if (root.totalMs === null || list.some(({ kind }) => kind === 'gather')) return;
			const sum = list.reduce((total, { selfMs }) => total + (selfMs ?? 0), 0);
			expect(Math.abs(sum - root.totalMs)).toBeLessThanOrEqual(root.totalMs * 0.02 + 0.1);
		}
	);
});
