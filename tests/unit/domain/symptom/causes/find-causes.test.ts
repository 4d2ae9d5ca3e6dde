import { describe, expect, test } from 'vitest';
import { interpret, listPlans, nodeAt } from '../../../../fixtures/symptom-plans';
import { CAUSE_IDS } from '$lib/domain/symptom/symptom';

const causesOf = (...input: Parameters<typeof interpret>) => interpret(...input).causes;

describe('findCauses', () => {
	test('tells old statistics of one condition from columns that depend on each other', () => {
		expect(causesOf('stale-statistics-001')[0]?.id).toBe('stale-statistics');
		const several = causesOf('stale-statistics-001', (root) => {
			nodeAt(root, '0.0.0.1.0').Filter =
				"((state = 'staged'::text) AND (kind = 'x'::text) AND (zone = 'y'::text))";
		});
		expect(several[0]?.id).toBe('correlated-predicates');
		expect(several.find(({ id }) => id === 'stale-statistics')?.against[0]).toContain('cannot tell');
	});

	test('blames the memory where the rows were foreseen, and the estimate where they were not', () => {
		expect(causesOf('undersized-memory-004')[0]).toMatchObject({
			id: 'undersized-memory',
			because: ['hash-spill'],
			against: []
		});
		const explained = causesOf('stale-statistics-001').find(({ id }) => id === 'undersized-memory');
		expect(explained?.against[0]).toContain('underestimated');
	});

	test('says of a skewed key that memory hardly helps', () => {
		const causes = causesOf('skewed-join-key-007');
		expect(causes[0]?.id).toBe('skewed-join-key');
		expect(causes.find(({ id }) => id === 'undersized-memory')?.against[0]).toContain('cannot part them');
	});

	test('names a bloated table by its empty pages even without a symptom', () => {
		expect(interpret('table-bloat-044')).toMatchObject({ symptoms: [], causes: [{ id: 'table-bloat' }] });
	});

	test('leaves the runbooks to the server', () => {
		expect(causesOf('stale-statistics-001').every(({ runbooks }) => runbooks.length === 0)).toBe(true);
	});

	test('offers statements that only read, each of one sentence', () => {
		for (const name of listPlans()) {
			for (const { id, confirm } of causesOf(name)) {
				expect(CAUSE_IDS).toContain(id);
				for (const { sql, readsOnly } of confirm) {
					expect(readsOnly).toBe(true);
					expect(sql, name).toMatch(/^SELECT [^;]+;$/);
					expect(sql, name).not.toMatch(/undefined|null\.|''/);
				}
			}
		}
	});

	test('fills in the table with its schema, quoted where it must be', () => {
		const [stale] = causesOf('stale-statistics-001', (root) => {
			Object.assign(nodeAt(root, '0.0.0.1.0'), { 'Relation Name': "Crew's Order", Schema: 'billing' });
		});
		expect(stale?.confirm[0]?.sql).toContain(`relid = 'billing."Crew''s Order"'::regclass`);
		expect(stale?.confirm[1]?.sql).toContain(`tablename = 'Crew''s Order' AND schemaname = 'billing'`);
	});
});
