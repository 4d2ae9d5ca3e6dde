import type { CreationAttributes } from 'sequelize';
import type { CauseId, SymptomId } from '$lib/domain/symptom/symptom';
import { CAUSE_IDS, SYMPTOM_IDS } from '$lib/domain/symptom/symptom';
import type { Reading } from '$lib/domain/reading/reading';
import { EvidenceModel } from '$lib/server/db/models/evidence';
import { IncidentModel } from '$lib/server/db/models/incident';
import { ReadingModel } from '$lib/server/db/models/reading';
import { write } from '$lib/server/db/transaction';
import { seededRandom } from './evaluation';

/** Words of an invented language; the first are the commonest. */
const VOCABULARY = 30_000;
const WORDS = 300;
const SYMPTOMS = 4;
/** Every so many incidents one has a reading. */
const READING_EVERY = 10;
const CONSONANTS = 'bcdfghjklmnpqrstvwxyz';
const VOWELS = 'aeiou';
const BATCH = 500;

export const random = seededRandom(7);

/** A word by its place in Zipf's order (0 is the commonest): two to four syllables, spread over the alphabet. */
function wordAt(rank: number): string {
	const syllables = CONSONANTS.length * VOWELS.length;
	let left = (rank + 1) * 7919;
	let word = '';
	while (left > 0 || word.length < 4) {
		const syllable = left % syllables;
		word += `${CONSONANTS[Math.floor(syllable / VOWELS.length)]}${VOWELS[syllable % VOWELS.length]}`;
		left = Math.floor(left / syllables);
	}
	return word;
}

/** A place drawn so that place r comes about 1 / r as often as the first (inverse of the harmonic sum). */
function drawRank(): number {
	return Math.min(VOCABULARY - 1, Math.floor(VOCABULARY ** random()) - 1 + (random() < 0.5 ? 0 : 1));
}

/** A text of that many words. */
export function drawText(words: number): string {
	return Array.from({ length: words }, () => wordAt(drawRank())).join(' ');
}

function pick<T>(list: readonly T[]): T {
	const item = list[Math.floor(random() * list.length)];
	if (item === undefined) throw new Error('An empty list has nothing to pick.');
	return item;
}

/** A reading with four symptoms and two causes on a plan of one scan. */
export function drawReading(): Reading {
	const symptoms = Array.from({ length: SYMPTOMS }, () => pick<SymptomId>(SYMPTOM_IDS));
	const relation = wordAt(drawRank());
	return {
		name: 'plan.json',
		bytes: 4096,
		sha256: Math.floor(random() * 1e12)
			.toString(16)
			.padStart(64, '0'),
		kind: 'plan',
		format: 'postgres-json',
		engine: 'postgresql',
		engineVersion: '16.3',
		statement: {
			fingerprint: Math.floor(random() * 1e12)
				.toString(16)
				.padStart(16, '0'),
			text: `select ? from ${relation}`
		},
		plan: null,
		spills: null,
		trails: [],
		symptoms: [...new Set(symptoms)].map((id) => ({
			id,
			operator: null,
			weight: random(),
			figures: {},
			summary: ''
		})),
		causes: [pick<CauseId>(CAUSE_IDS), pick<CauseId>(CAUSE_IDS)].map((id) => ({
			id,
			confidence: random(),
			because: symptoms.slice(0, 1),
			against: [],
			confirm: [],
			runbooks: []
		})),
		sizing: [],
		warnings: []
	};
}

/** Fills the open database with incidents of 300 words, every tenth with a reading; without indexing them. */
export async function fillCorpus(incidents: number): Promise<void> {
	for (let done = 0; done < incidents; done += BATCH) {
		await write(async () => {
			const first = done + 1;
			const rows = Array.from({ length: Math.min(BATCH, incidents - done) }, (_, i) =>
				drawIncident(first + i)
			);
			await IncidentModel.bulkCreate(rows);
			for (const { number } of rows) if (number % READING_EVERY === 0) await addReading(number);
		});
	}
}

function drawIncident(number: number): CreationAttributes<IncidentModel> & { number: number } {
	const at = new Date(Date.UTC(2020, 0, 1) + number * 900_000).toISOString();
	return {
		number,
		title: drawText(8),
		narrative: drawText(WORDS),
		service: `service-${Math.floor(random() * 40)}`,
		engine: 'postgresql',
		severity: 3,
		state: 'resolved',
		origin: 'import',
		startedAt: at,
		resolution: drawText(40),
		labels: '[]',
		revision: 1,
		createdAt: at,
		updatedAt: at
	};
}

async function addReading(incidentNumber: number): Promise<void> {
	const reading = drawReading();
	const { id } = await EvidenceModel.create({
		incidentNumber,
		sha256: reading.sha256,
		name: reading.name,
		bytes: reading.bytes,
		kind: 'plan',
		format: reading.format,
		state: 'read',
		addedAt: '2026-01-01T00:00:00.000Z',
		addedById: null
	});
	await ReadingModel.create({ evidenceId: id, position: 0, body: JSON.stringify(reading) });
}
