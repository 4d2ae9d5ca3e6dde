import type { Evidence } from '$lib/domain/incident/incident';
import type { Reading, Spills, Symptom } from '$lib/domain/reading/reading';

/** A reading in the list of evidence: enough to name it, not the whole plan. */
export interface ListedReading {
	/** "12.0": evidence and place in it, for the address. */
	key: string;
	kind: Reading['kind'];
	engine: Reading['engine'];
	engineVersion: string | null;
	symptoms: Symptom[];
	spills: Pick<Spills, 'files' | 'bytes'> | null;
	warnings: Reading['warnings'];
	shown: boolean;
}

export interface ListedEvidence extends Omit<Evidence, 'readings'> {
	readings: ListedReading[];
}

/** What the page shows of an incident's evidence. */
export interface DrawnEvidence {
	/** The reading that the page is about; null: none is read yet. */
	main: (Reading & { key: string }) | null;
	/** Symptoms that only other pieces of evidence show. */
	otherSymptoms: { symptom: Symptom; from: string }[];
	/** Temporary files of logs that are not the main reading. */
	logs: { name: string; spills: Spills }[];
	list: ListedEvidence[];
	/** Whether a reading is still under way. */
	busy: boolean;
}

interface Placed {
	key: string;
	reading: Reading;
	/** It shows how it was after a remedy, not what the incident was. */
	isAfter: boolean;
}

/** Most telling first: a trail before symptoms before temporary files; then the heaviest; then the first given. */
function rank({ reading }: Placed): number {
	const heaviest = reading.symptoms[0]?.weight ?? 0;
	if (reading.trails.length > 0) return 4 + heaviest;
	if (reading.plan !== null && reading.symptoms.length > 0) return 3 + heaviest;
	if (reading.spills !== null && reading.spills.files > 0) return 2;
	return reading.kind === 'unknown' ? 0 : 1;
}

function toListed(
	{ key, reading }: Pick<Placed, 'key' | 'reading'>,
	mainKey: string | undefined
): ListedReading {
	const { kind, engine, engineVersion, symptoms, spills, warnings } = reading;
	return {
		key,
		kind,
		engine,
		engineVersion,
		symptoms,
		spills: spills === null ? null : { files: spills.files, bytes: spills.bytes },
		warnings: warnings.slice(0, 5),
		shown: key === mainKey
	};
}

/**
 * Chooses the reading that the page is about (or the one asked for by its key), and lists the rest in short.
 * `after`: ids of evidence that shows how it was after a remedy; it speaks for the incident only when asked for.
 */
export function drawEvidence(
	evidence: readonly Evidence[],
	askedKey: string | null,
	after: readonly number[] = []
): DrawnEvidence {
	const placed = evidence.flatMap(({ id, readings }) =>
		readings.map((reading, position) => ({
			key: `${id}.${position}`,
			reading,
			isAfter: after.includes(id)
		}))
	);
	const asked = placed.find(({ key }) => key === askedKey);
	const ofFault = placed.filter(({ isAfter }) => !isAfter);
	const main = asked ?? ofFault.toSorted((a, b) => rank(b) - rank(a)).find((one) => rank(one) > 0);
	const others = ofFault.filter(({ key }) => key !== main?.key);
	const known = new Set(main?.reading.symptoms.map(({ id }) => id));
	const otherSymptoms = others.flatMap(({ reading }) =>
		reading.symptoms.flatMap((symptom) => {
			if (known.has(symptom.id) || symptom.id === 'no-runtime-figures') return [];
			known.add(symptom.id);
			return [{ symptom, from: reading.name }];
		})
	);
	return {
		main: main === undefined ? null : { ...main.reading, key: main.key },
		otherSymptoms,
		logs: others.flatMap(({ reading }) =>
			reading.spills !== null && reading.spills.files > 0
				? [{ name: reading.name, spills: reading.spills }]
				: []
		),
		list: evidence.map((one) => ({
			...one,
			readings: one.readings.map((reading, position) =>
				toListed({ key: `${one.id}.${position}`, reading }, main?.key)
			)
		})),
		busy: evidence.some(({ state }) => state === 'reading')
	};
}
