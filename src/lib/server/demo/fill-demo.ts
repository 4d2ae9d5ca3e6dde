import { database } from '../db/connection';
import { select } from '../db/query';
import { adoptContent } from '../runbooks/adopt-content';
import { readDemoContent } from './demo-content';
import { fillIncident } from './fill-incident';
import { fillKeepers, fillPeople } from './fill-people';

/**
 * Fills the open, empty database with the Northmoor demonstration: people, runbooks and incidents live
 * through the same services as anybody's, evidence through the same reading. Incidents under way are dated
 * back from `now`. Throws where the database holds something, or the demonstration's own text does not fit.
 * Answers how many incidents it logged.
 */
export async function fillDemo(dataDir: string, now: Date = new Date()): Promise<number> {
	if (database().dataDir !== dataDir) throw new Error(`${dataDir} is not the folder that is open.`);
	const [held] = await select<{ held: number }>(
		'SELECT (SELECT count(*) FROM incidents) + (SELECT count(*) FROM people) AS held'
	);
	if (held?.held !== 0) throw new Error('Only an empty data folder can be filled with the demonstration.');
	const { people, incidents } = await readDemoContent();
	const actors = await fillPeople(people);
	await adoptContent();
	await fillKeepers(people, actors, now);
	for (const incident of incidents) await fillIncident(incident, { actors, now });
	return incidents.length;
}
