import type { CauseRule } from './cause-rule';
import { indexesOf, settingsNamed } from './confirm';
import { findTablesBelow } from './tables';

const CERTAIN = 0.93;
const NEARLY_CERTAIN = 0.9;

/** A prepared statement whose one plan has to serve all values. */
export const genericPlanCause: CauseRule = (input) =>
	input.has('generic-plan')
		? {
				id: 'generic-plan',
				confidence: CERTAIN,
				because: ['generic-plan'],
				against: [],
				confirm: [
					'SELECT name, statement, generic_plans, custom_plans FROM pg_prepared_statements;',
					settingsNamed(['plan_cache_mode'])
				]
			}
		: null;

/** An offset that lets the server work through all earlier pages. */
export const deepOffsetCause: CauseRule = (input) => {
	const [limit] = input.operatorsWith('deep-offset');
	if (limit === undefined) return null;
	return {
		id: 'deep-offset',
		confidence: CERTAIN,
		because: ['deep-offset'],
		against: [],
		confirm: findTablesBelow(limit).slice(0, 1).map(indexesOf)
	};
};

/** A plan so dear on paper that it was compiled, and so quick that it did not pay. */
export const jitOverhead: CauseRule = (input) =>
	input.has('jit-dominates')
		? {
				id: 'jit-overhead',
				confidence: NEARLY_CERTAIN,
				because: ['jit-dominates'],
				against: input.has('row-overestimate')
					? ['Rows were overestimated, and with them the cost that switched compiling on.']
					: [],
				confirm: [
					settingsNamed(['jit', 'jit_above_cost', 'jit_inline_above_cost', 'jit_optimize_above_cost'])
				]
			}
		: null;

/** All worker slots taken by others. */
export const tooFewWorkers: CauseRule = (input) =>
	input.has('missing-parallel-workers')
		? {
				id: 'too-few-workers',
				confidence: NEARLY_CERTAIN,
				because: ['missing-parallel-workers'],
				against: [],
				confirm: [
					settingsNamed(['max_worker_processes', 'max_parallel_workers', 'max_parallel_workers_per_gather']),
					"SELECT leader_pid, count(*) FROM pg_stat_activity WHERE backend_type = 'parallel worker' GROUP BY leader_pid;"
				]
			}
		: null;
