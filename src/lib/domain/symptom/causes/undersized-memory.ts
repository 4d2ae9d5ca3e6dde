import { found, type CauseRule } from './cause-rule';
import { settingsNamed } from './confirm';

/** A spill that nothing below explains: the rows were expected and simply do not fit. */
const UNEXPLAINED = 0.8;
/** A bitmap can only be lossy for want of memory. */
const LOSSY = 0.85;
/** A spill at the end of a misestimate: more memory helps, but the plan was chosen for fewer rows. */
const EXPLAINED = 0.62;
/** The larger side was hashed: a smaller table would not need it. */
const WRONG_SIDE = 0.55;
/** Equal keys cannot be parted; memory is the dear way out. */
const SKEWED = 0.3;

/** An allowance too small for rows that the planner foresaw. */
export const undersizedMemory: CauseRule = (input) => {
	const because = found(input, [
		'hash-spill',
		'sort-spill',
		'aggregate-spill',
		'materialize-spill',
		'bitmap-lossy'
	]);
	if (because.length === 0) return null;
	const unexplained = input.overflows.filter((overflow) => !overflow.explained);
	const against: string[] = [];
	let confidence = unexplained.length > 0 ? UNEXPLAINED : EXPLAINED;
	if (input.overflows.length === 0) confidence = LOSSY;
	else if (unexplained.length === 0) {
		against.push(
			'The rows were underestimated before they overflowed: with a right estimate the plan may be another one.'
		);
	} else if (input.has('skewed-hash')) {
		confidence = SKEWED;
		against.push(
			'A few keys hold most rows of the table: batches cannot part them, and each further such key needs as much again.'
		);
	} else if (input.has('build-side-larger')) {
		confidence = WRONG_SIDE;
		against.push('The larger side was hashed: the smaller one would have needed a fraction of the memory.');
	}
	return {
		id: 'undersized-memory',
		confidence,
		because,
		against,
		confirm: [
			settingsNamed(['work_mem', 'hash_mem_multiplier', 'max_connections', 'max_parallel_workers_per_gather'])
		]
	};
};
