import { describe, expect, it } from 'vitest';
import { compareReadings, nameComparison, type Comparison } from '$lib/domain/reading/compare-readings';
import { walkOperators } from '$lib/domain/reading/operator';
import type { Reading } from '$lib/domain/reading/reading';
import { COMPARED_CASES as CASES, readSide } from '../../../fixtures/compare';
import { readOne } from '../../../fixtures/evidence-files';

/** Real pairs: plans of PostgreSQL 15.18 before and after a remedy; each case's note.md names it. */
async function readPair(name: string): Promise<{ before: Reading; after: Reading }> {
	return { before: await readOne(readSide(name, 'before')), after: await readOne(readSide(name, 'after')) };
}

async function compareCase(name: string): Promise<Comparison> {
	const { before, after } = await readPair(name);
	return compareReadings(before, after);
}

/** "scan of invoice → scan of invoice": operators in pairs, by name. */
async function pairNames(name: string): Promise<string[]> {
	const { before, after } = await readPair(name);
	const names = ({ plan }: Reading) =>
		new Map(
			plan === null
				? []
				: [...walkOperators(plan.root)].map((one) => [one.path, `${one.name} ${one.relation ?? ''}`.trim()])
		);
	const [old, now] = [names(before), names(after)];
	return compareReadings(before, after).operators.map(
		(each) => `${old.get(each.before ?? '') ?? 'none'} → ${now.get(each.after ?? '') ?? 'none'}`
	);
}

function changesAt(comparison: Comparison, before: string): string[] {
	return comparison.operators.find((each) => each.before === before)?.changes ?? [];
}

describe('compareReadings', () => {
	it('says what cannot be compared', async () => {
		const { before } = await readPair('healthy-twice');
		const unknown = await readOne('neither plan nor log');
		expect(compareReadings(unknown, unknown)).toMatchObject({
			summary: 'Neither is a plan or a log that can be read, so there is nothing to compare.',
			timeMs: [null, null],
			temporaryBytes: [null, null],
			operators: []
		});
		expect(compareReadings(before, unknown).summary).toBe(
			'Before is a plan, after neither a plan nor a log that can be read: only two plans, or two logs, can be compared.'
		);
	});

	it('concludes nothing from a plan without run-time figures', async () => {
		const comparison = await compareCase('estimates-only-before');
		expect(comparison.timeMs[0]).toBeNull();
		expect(comparison.timeMs[1]).toBeGreaterThan(0);
		expect(comparison.temporaryBytes).toEqual([null, 0]);
		expect(comparison.symptomsGone).toEqual(['no-runtime-figures']);
		expect(comparison.symptomsNew).toEqual([]);
		expect(comparison.summary).toMatch(/^The plan before holds estimates only/);
	});

	it('does not take a symptom for gone because the plan after was not run', async () => {
		const { before } = await readPair('statistics-taken-swap-the-build-side');
		const { before: estimates } = await readPair('estimates-only-before');
		expect(compareReadings(before, estimates).symptomsGone).toEqual([]);
	});

	it('says when the statements differ', async () => {
		const { before } = await readPair('healthy-twice');
		const of = (fingerprint: string): Reading => ({
			...before,
			statement: { fingerprint, text: 'SELECT ?' }
		});
		expect(compareReadings(of('0'.repeat(16)), of('1'.repeat(16))).summary).toMatch(
			/^These are two different statements/
		);
		expect(compareReadings(of('0'.repeat(16)), of('0'.repeat(16))).summary).not.toMatch(/different/);
	});

	it('says when two plans without their statements read no table in common', async () => {
		const { before } = await readPair('more-memory-keeps-the-plan');
		const { after } = await readPair('index-replaces-the-hash-join');
		expect(compareReadings(before, after).summary).toMatch(/^The two plans read no table in common/);
	});

	it('tells time, estimate, build side, what is cured and what is not in one paragraph', async () => {
		expect((await compareCase('statistics-taken-swap-the-build-side')).summary).toBe(
			'Time fell from 666 to 388 ms. The estimate is right now (451,500 for 450,300), the join builds on invoice instead of invoice_line, the sort no longer overflows. The hash join still does, 27 MB instead of 55.1.'
		);
	});

	it('names the setting that was raised', async () => {
		const { summary } = await compareCase('more-memory-keeps-the-plan');
		expect(summary).toContain('Set: work_mem 55MB.');
		expect(summary).toContain('The sort no longer overflows.');
	});

	it('tells a mended estimate from a mended spill', async () => {
		const comparison = await compareCase('estimate-mended-spill-stays');
		expect(comparison.summary).toContain('The estimate is right now (260,000 for 259,029).');
		expect(comparison.summary).toContain('The hash aggregate still overflows, 26 MB as before.');
		expect(comparison.symptomsGone).toEqual(['row-underestimate']);
	});

	// Temp Written Blocks of the root × 8,192 (EXPLAIN's own sum; manual 15, EXPLAIN, BUFFERS).
	it('sums temporary bytes as the engine does', async () => {
		const { before, after } = await readPair('statistics-taken-swap-the-build-side');
		const rootBytes = (side: 'before' | 'after') => {
			const text = String(readSide('statistics-taken-swap-the-build-side', side));
			return Number(/"Temp Written Blocks": (\d+)/.exec(text)?.[1]) * 8192;
		};
		expect(compareReadings(before, after).temporaryBytes).toEqual([rootBytes('before'), rootBytes('after')]);
	});

	it('matches a join whose sides were swapped, and each table with itself', async () => {
		expect(await pairNames('statistics-taken-swap-the-build-side')).toEqual([
			'GroupAggregate → HashAggregate',
			'Sort → Sort',
			'Hash Join → Hash Join',
			'Seq Scan invoice → Seq Scan invoice',
			'Hash → Hash',
			'Seq Scan invoice_line → Seq Scan invoice_line'
		]);
		const comparison = await compareCase('statistics-taken-swap-the-build-side');
		expect(changesAt(comparison, '0.0.0')).toContain('builds on invoice instead of invoice_line');
		expect(changesAt(comparison, '0.0')).toContain('no longer overflows: was 11.2 MB of temporary files');
	});

	it('matches a join that is done in another way', async () => {
		const { before, after } = await readPair('nested-loop-becomes-hash-join');
		const comparison = compareReadings(before, after);
		expect(nameComparison(comparison, before, after).changes).toContainEqual(
			expect.objectContaining({
				before: '0.0.0',
				name: 'hash join on container_id',
				changes: expect.arrayContaining(['hash join instead of nested loop'])
			})
		);
		expect(changesAt(comparison, '0.0')).toEqual(['gone']);
	});

	it('matches a join whose input got another alias', async () => {
		const comparison = await compareCase('input-aggregated-before-the-join');
		expect(comparison.operators.find((each) => each.before === '0.0')).toMatchObject({ after: '0' });
		expect(comparison.summary).toContain('The hash join no longer overflows.');
	});

	it('says what takes the place of a hash join that overflowed', async () => {
		expect((await compareCase('index-replaces-the-hash-join')).summary).toBe(
			'Time fell from 225 to 0.5 ms. A nested loop takes the place of the hash join that overflowed, invoice is read from an index alone instead of from end to end.'
		);
	});

	it('finds nothing changed between two runs of a healthy plan in two forms', async () => {
		const comparison = await compareCase('healthy-twice');
		expect(comparison.summary).toMatch(/^Nothing changed/);
		expect(comparison.symptomsGone).toEqual([]);
		expect(comparison.symptomsNew).toEqual([]);
	});

	it.each(CASES)('finds nothing changed in %s against itself', async (name) => {
		const { before, after } = await readPair(name);
		for (const reading of [before, after]) {
			const comparison = compareReadings(reading, reading);
			expect(comparison.summary).toMatch(/Nothing changed/);
			expect(comparison.operators.filter((each) => each.before !== each.after)).toEqual([]);
			expect(comparison.operators.flatMap(({ changes }) => changes)).toEqual([]);
			expect([...comparison.symptomsGone, ...comparison.symptomsNew]).toEqual([]);
		}
	});

	it.each(CASES)('reverses what is gone and new, and keeps the pairs, when %s is swapped', async (name) => {
		const { before, after } = await readPair(name);
		const there = compareReadings(before, after);
		const back = compareReadings(after, before);
		expect(back.symptomsGone).toEqual(there.symptomsNew);
		expect(back.symptomsNew).toEqual(there.symptomsGone);
		expect(back.timeMs).toEqual(there.timeMs.toReversed());
		expect(back.temporaryBytes).toEqual(there.temporaryBytes.toReversed());
		const pairs = (comparison: Comparison, swap: boolean) =>
			comparison.operators
				.map((each) => (swap ? [each.after, each.before] : [each.before, each.after]).join(' '))
				.sort();
		expect(pairs(back, true)).toEqual(pairs(there, false));
	});

	it.each(CASES)('lists every operator of both plans of %s once', async (name) => {
		const { before, after } = await readPair(name);
		const { operators } = compareReadings(before, after);
		const paths = ({ plan }: Reading) =>
			plan === null ? [] : [...walkOperators(plan.root)].map((one) => one.path);
		const listed = (side: 'before' | 'after') => operators.flatMap((each) => each[side] ?? []).sort();
		expect(listed('before')).toEqual(paths(before).sort());
		expect(listed('after')).toEqual(paths(after).sort());
	});
});

describe('compareReadings on logs', () => {
	const line = (size: number) =>
		`2026-03-01 02:00:00.000 UTC [7] LOG:  temporary file: path "base/pgsql_tmp/pgsql_tmp7.0", size ${size}\n`;

	it('compares the temporary files of two logs', async () => {
		const before = await readOne(line(50_000_000) + line(50_000_000));
		const after = await readOne(line(10_000_000));
		expect(compareReadings(before, after)).toMatchObject({
			summary: 'Temporary files fell from 95.4 to 9.54 MB.',
			timeMs: [null, null],
			temporaryBytes: [100_000_000, 10_000_000],
			operators: []
		});
	});
});
