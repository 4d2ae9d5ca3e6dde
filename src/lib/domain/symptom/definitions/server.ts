import { LEAST_BLOCKS, LEAST_READ_SHARE } from '../rules/cold-reads';
import { LEAST_JIT_MS, LEAST_JIT_SHARE } from '../rules/jit-dominates';
import { MOST_WORKERS_MISSING } from '../rules/missing-parallel-workers';
import type { SymptomId } from '../symptom';
import type { SymptomDefinition } from './definition';

/** Symptoms of the server around the statement. */
export const SERVER_SYMPTOMS = {
	'missing-parallel-workers': {
		id: 'missing-parallel-workers',
		title: 'Parallel workers missing',
		what: 'The plan was made for several processes and fewer could be started: all slots were taken by other statements or by maintenance.',
		recognise: 'PostgreSQL: "Workers Launched" below "Workers Planned" at a Gather.',
		thresholds: [MOST_WORKERS_MISSING],
		usualCauses: ['too-few-workers']
	},
	'cold-reads': {
		id: 'cold-reads',
		title: 'Read from outside the cache',
		what: 'Most blocks had to be fetched into the database’s cache. After a restart or a switch-over that passes by itself; where it stays, more is read than the cache holds.',
		recognise: 'PostgreSQL: "Buffers: shared hit=… read=…" at the top of the plan.',
		thresholds: [LEAST_BLOCKS, LEAST_READ_SHARE],
		usualCauses: ['cold-cache', 'table-bloat', 'missing-index']
	},
	'jit-dominates': {
		id: 'jit-dominates',
		title: 'Compiling takes longer than running',
		what: 'A plan that looks dear is compiled before it runs. Where it was quick in truth, the compiling is most of the time.',
		recognise: 'PostgreSQL: "JIT: … Timing: … Total" against the execution time.',
		thresholds: [LEAST_JIT_SHARE, LEAST_JIT_MS],
		usualCauses: ['jit-overhead']
	}
} satisfies Partial<Record<SymptomId, SymptomDefinition>>;
