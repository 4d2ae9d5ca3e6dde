import { walkOperators, type Operator } from '$lib/domain/reading/operator';
import { phraseOperator } from '$lib/domain/reading/operator-phrase';
import type { Engine, OperatorSizing, Reading } from '$lib/domain/reading/reading';
import { computeSizing } from '$lib/domain/sizing/compute-sizing';
import { defaultHashMemMultiplier, readMajorVersion } from '$lib/domain/sizing/layout';
import type { SizingInput } from '$lib/domain/sizing/sizing';
import { formatKb, readMemoryKb } from '$lib/domain/sizing/units';

/** PostgreSQL's default work_mem (manual 15, section 20.4.1). */
const DEFAULT_WORK_MEM_KB = 4096;
/** What the panel's slider ends at. */
export const WIDEST_BYTES = 8192;
/** Sessions assumed at first: a figure to be changed, not a finding. */
const ASSUMED_SESSIONS = 40;

/** What the panel starts with where nothing was read: a hash table that just overflows at the defaults. */
export const EXAMPLE: Required<
	Pick<SizingInput, 'kind' | 'rows' | 'width' | 'memoryKb' | 'hashMemMultiplier' | 'sessions'>
> & {
	engine: Engine;
} = {
	kind: 'hash',
	rows: 450_000,
	width: 22,
	memoryKb: DEFAULT_WORK_MEM_KB,
	hashMemMultiplier: 2,
	sessions: ASSUMED_SESSIONS,
	engine: 'postgresql'
};

/** One operator that overflowed, as a start for the panel. */
export interface SizingStart {
	path: string;
	/** "hash join on invoice_no, 28 MB needed" */
	label: string;
	input: SizingInput;
}

/** The operators of a reading that the panel can size, the greatest need first; empty: none, or no rows known. */
export function listStarts(reading: Reading): SizingStart[] {
	const starts: SizingStart[] = [];
	for (const sizing of [...reading.sizing].sort((a, b) => b.neededKb - a.neededKb)) {
		const input = startSizing(reading, sizing);
		const operator = reading.plan === null ? null : findOperator(reading.plan.root, sizing.operator);
		if (input === null || operator === null || starts.some((one) => one.path === sizing.operator)) continue;
		const label = `${phraseOperator(operator)}, ${formatKb(sizing.neededKb)} needed`;
		starts.push({ path: sizing.operator, label, input });
	}
	return starts;
}

function findOperator(root: Operator, path: string): Operator | null {
	for (const operator of walkOperators(root)) if (operator.path === path) return operator;
	return null;
}

/** The panel's figures for one spilling operator of a reading; null: its plan doesn't hold the rows. */
function startSizing(reading: Reading, sizing: OperatorSizing): SizingInput | null {
	if (reading.plan === null) return null;
	const operator = findSizedOperator(reading.plan.root, sizing);
	const rows = operator?.actualRows ?? operator?.estimatedRows ?? null;
	if (operator === null || rows === null || rows <= 0) return null;
	const { settings } = reading.plan;
	const version = readMajorVersion(reading.engineVersion);
	const multiplier =
		Number(settings['hash_mem_multiplier'] ?? Number.NaN) || defaultHashMemMultiplier(version);
	const input: SizingInput = {
		kind: sizing.kind,
		rows,
		width: operator.width ?? EXAMPLE.width,
		memoryKb: givenSettingKb(settings, sizing, multiplier),
		hashMemMultiplier: multiplier,
		engine: reading.engine,
		...(reading.engineVersion === null ? {} : { engineVersion: reading.engineVersion }),
		sessions: ASSUMED_SESSIONS
	};
	return { ...input, width: widen(input, sizing.setting.valueKb) };
}

/**
 * The row width at which the panel needs no less than the reading found. The reading knows the true size of the
 * rows from what they took on disk; the plan prints the planner's guess, and a setting worked out from a guess
 * that is too small would overflow again.
 */
function widen(input: SizingInput, settingKb: number): number {
	const isEnough = (width: number) => computeSizing({ ...input, width }).setting.valueKb >= settingKb;
	let enough = WIDEST_BYTES;
	for (let tooLittle = Math.floor(input.width) - 1; enough - tooLittle > 1;) {
		const middle = Math.floor((tooLittle + enough) / 2);
		if (isEnough(middle)) enough = middle;
		else tooLittle = middle;
	}
	return isEnough(input.width) ? input.width : enough;
}

/** The operator whose rows fill the memory: of a hash join the side that is hashed. */
function findSizedOperator(root: Operator, sizing: OperatorSizing): Operator | null {
	const operator = findOperator(root, sizing.operator);
	if (operator?.kind !== 'hash-join') return operator;
	return operator.children.find((child) => child.kind === 'hash-build') ?? operator;
}

/** The setting as it stood, kB: as the plan prints it, else back from what the operator was given. */
function givenSettingKb(
	settings: Record<string, string>,
	sizing: OperatorSizing,
	multiplier: number
): number {
	const printed = settings[sizing.setting.name];
	const printedKb = printed === undefined ? null : readMemoryKb(printed);
	if (printedKb !== null && printedKb > 0) return printedKb;
	if (sizing.givenKb === null) return DEFAULT_WORK_MEM_KB;
	return sizing.kind === 'sort' ? sizing.givenKb : Math.round(sizing.givenKb / multiplier);
}
