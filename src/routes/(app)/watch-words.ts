import type { Watch } from '$lib/domain/watch/watch';

const WORDS = ['no', 'one', 'two', 'three', 'four', 'five', 'six', 'seven', 'eight', 'nine', 'ten'];

/** The weekday and the time of day in a zone: "Tuesday, 02:14", with UTC behind it while the zone is a guess. */
export function writeHeading(now: string, zone: string, zoneKnown: boolean): string {
	const at = new Date(now);
	const day = new Intl.DateTimeFormat('en-GB', { weekday: 'long', timeZone: zone }).format(at);
	const clock = new Intl.DateTimeFormat('en-GB', {
		hour: '2-digit',
		minute: '2-digit',
		hourCycle: 'h23',
		timeZone: zone
	}).format(at);
	return `${day}, ${clock}${zoneKnown ? '' : ' UTC'}`;
}

/** How many incidents are open and how many of them nobody is on, in a sentence or two. */
export function sayHowMany(watch: Pick<Watch, 'open' | 'openTotal' | 'incidents'>): string {
	if (watch.incidents === 0) return 'Nothing has been logged yet.';
	if (watch.openTotal === 0) return 'Nothing is open.';
	// Those without an owner come first, so the ones shown hold them all unless the whole page is without one.
	const free = watch.open.filter((incident) => incident.owner === null).length;
	const open = `${sayNumber(watch.openTotal)} ${watch.openTotal === 1 ? 'incident is' : 'incidents are'} open.`;
	if (free === 0)
		return `${capitalise(open)} Somebody is on ${watch.openTotal === 1 ? 'it' : 'each of them'}.`;
	if (free === watch.openTotal)
		return `${capitalise(open)} Nobody is on ${free === 1 ? 'it' : 'any of them'}.`;
	return `${capitalise(open)} ${capitalise(sayNumber(free))} ${free === 1 ? 'needs' : 'need'} somebody.`;
}

function sayNumber(count: number): string {
	return WORDS[count] ?? String(count);
}

function capitalise(text: string): string {
	return text.charAt(0).toUpperCase() + text.slice(1);
}
