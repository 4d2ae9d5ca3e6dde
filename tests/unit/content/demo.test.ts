import { existsSync, readdirSync, readFileSync } from 'node:fs';
import path from 'node:path';
import { describe, expect, it } from 'vitest';
import { ROLES } from '$lib/domain/person/person';
import { readDemoContent, type DemoIncident } from '$lib/server/demo/demo-content';
import { contentRunbooks } from '$lib/server/runbooks/content-runbooks';

const { people, incidents } = await readDemoContent();
const keys = people.map(({ key }) => key);
const slugs = contentRunbooks().map(({ slug }) => slug);

/** Folders whose incident does not fit what is asked of it. */
function foldersWhere(fits: (incident: DemoIncident) => boolean): string[] {
	return incidents.filter((incident) => !fits(incident)).map(({ folder }) => path.basename(folder));
}

describe('content/demo', () => {
	it('holds eight people over the four roles, with addresses that lead nowhere', () => {
		expect(people).toHaveLength(8);
		expect(new Set(people.map(({ role }) => role))).toEqual(new Set(ROLES));
		for (const { email } of people) expect(email).toMatch(/@northmoor\.example$/);
	});

	it('holds at least 44 incidents of at least five services over two years', () => {
		expect(incidents.length).toBeGreaterThanOrEqual(44);
		expect(new Set(incidents.map(({ service }) => service)).size).toBeGreaterThanOrEqual(5);
		const times = incidents.flatMap(({ startedAt }) => (startedAt === undefined ? [] : [Date.parse(startedAt)]));
		const days = (Math.max(...times) - Math.min(...times)) / 86_400_000;
		expect(days).toBeGreaterThan(700);
	});

	it('has something under way at any time: open, contained, and one that nobody is on', () => {
		const now = incidents.filter(({ startedMinutesAgo }) => startedMinutesAgo !== undefined);
		expect(new Set(now.map(({ state }) => state))).toEqual(new Set(['open', 'contained']));
		expect(now.some(({ owner }) => owner === null)).toBe(true);
	});

	it('begins each incident once, and tells what is after its start in order', () => {
		expect(
			foldersWhere(
				(one) =>
					(one.startedAt === undefined) !== (one.startedMinutesAgo === undefined) &&
					one.detected <= (one.resolved ?? Infinity) &&
					(one.contained ?? 0) <= (one.resolved ?? Infinity)
			)
		).toEqual([]);
	});

	it('says cause and end of what is over, and leaves both open elsewhere', () => {
		expect(
			foldersWhere(({ state, cause, resolution, resolved }) =>
				state === 'resolved' || state === 'reviewed'
					? cause !== undefined && resolution !== null && resolved !== undefined
					: resolution === null && resolved === undefined
			)
		).toEqual([]);
	});

	it('names people, runbooks and files that exist', () => {
		expect(
			foldersWhere((one) => {
				const named = [one.loggedBy, ...one.entries.map(({ by }) => by), ...one.attempts.map(({ by }) => by)];
				const files = [...one.evidence.map(({ file }) => file), ...one.attempts.flatMap(({ before, after }) => [before, after])];
				return (
					named.every((key) => keys.includes(key)) &&
					one.attempts.every(({ runbook, title }) => (runbook === undefined ? title !== undefined : slugs.includes(runbook))) &&
					files.every((file) => file === undefined || existsSync(path.join(one.folder, file)))
				);
			})
		).toEqual([]);
		expect(people.flatMap(({ runbooks }) => runbooks).sort()).toEqual([...slugs].sort());
	});

	it('keeps every file small and uses each', () => {
		expect(
			foldersWhere((one) => {
				const used = ['incident.md', 'resolution.md', ...one.evidence.map(({ file }) => file)];
				return readdirSync(one.folder).every((name) => used.includes(name) && readFileSync(path.join(one.folder, name)).length < 100_000);
			})
		).toEqual([]);
	});
});
