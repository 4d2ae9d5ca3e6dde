import { listOwnLinks, targetOf, type OwnTarget } from '$lib/domain/markdown/own-links';
import { SYMPTOM_IDS } from '$lib/domain/symptom/symptom';
import { findIncidents, findRunbookStates } from './link-store';

/** A number of an incident as an address may name it; null: it is none. */
function readNumber(text: string): number | null {
	return /^[1-9]\d{0,14}$/.test(text) ? Number(text) : null;
}

interface Link {
	href: string;
	target: OwnTarget;
}

/** What is there of all that some links name. */
interface Known {
	incidents: ReadonlySet<number>;
	runbooks: ReadonlyMap<string, string>;
	steps: number;
}

/** What stands in the way of a link; null: it leads somewhere. */
function findFault({ target }: Link, known: Known): string | null {
	switch (target.kind) {
		case 'incident': {
			const number = readNumber(target.number);
			return number !== null && known.incidents.has(number) ? null : `there is no incident ${target.number}`;
		}
		case 'runbook': {
			const state = known.runbooks.get(target.slug);
			if (state === undefined) return `there is no runbook ${target.slug}`;
			return state === 'retired' ? 'that runbook is retired' : null;
		}
		case 'symptom':
			return SYMPTOM_IDS.some((id) => id === target.id) ? null : `there is no symptom ${target.id}`;
		case 'step':
			return target.number >= 1 && target.number <= known.steps ? null : `there is no step ${target.number}`;
	}
}

/**
 * A sentence for each link of a text that leads nowhere within Catchwater: incidents, runbooks (retired ones too),
 * symptoms and steps of its own. `ownSlug` is the runbook that the text belongs to; null: it has no name yet.
 */
export async function findDeadLinks(body: string, steps: number, ownSlug: string | null): Promise<string[]> {
	const links = listOwnLinks(body).flatMap((href): Link[] => {
		const target = targetOf(href);
		return target === null ? [] : [{ href, target }];
	});
	const numbers = links.flatMap(({ target }) => {
		const number = target.kind === 'incident' ? readNumber(target.number) : null;
		return number === null ? [] : [number];
	});
	const slugs = links.flatMap(({ target }) => (target.kind === 'runbook' ? [target.slug] : []));
	const [incidents, runbooks] = await Promise.all([findIncidents(numbers), findRunbookStates(slugs)]);
	// A retired runbook that is written anew may point at itself.
	if (ownSlug !== null) runbooks.set(ownSlug, 'draft');
	return links.flatMap((link) => {
		const fault = findFault(link, { incidents, runbooks, steps });
		return fault === null ? [] : [`The link to ${link.href} leads nowhere: ${fault}.`];
	});
}
