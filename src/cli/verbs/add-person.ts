import { z } from 'zod';
import { personInput } from '$lib/domain/person/person-input';
import { SYSTEM } from '$lib/domain/person/person';
import { config } from '$lib/server/config';
import * as people from '$lib/server/people/people-service';
import { readArgs, readOptions, type Verb } from '../verb';
import { report, withFolder } from '../with-folder';

const HELP = `Usage: catchwater add-person --email ADDRESS --name NAME --role ROLE
       catchwater add-person --email ADDRESS --again

Adds a person and prints the link by which they set their password; it opens once, within ${people.LINK_DAYS} days.
ROLE is reader, responder, curator or administrator. With --again, prints a new link for somebody who is
here already (the old password works until the new one is set).`;

function describe({ person, linkToken }: { person: people.PersonDetail; linkToken: string }): string {
	return `${person.name} <${person.email}>, ${person.role}\n${config().origin}/welcome/${linkToken}`;
}

export const addPerson: Verb = {
	help: HELP,
	run(args) {
		const { values } = readArgs({
			args,
			options: {
				email: { type: 'string' },
				name: { type: 'string' },
				role: { type: 'string' },
				again: { type: 'boolean' }
			}
		});
		if (values.again) {
			const { email } = readOptions(personInput.pick({ email: true }), values);
			return withFolder(async () => report(await people.renewLink(SYSTEM, email), describe));
		}
		const input = readOptions(personInput.extend({ again: z.undefined().optional() }), values);
		return withFolder(async () => report(await people.add(SYSTEM, input), describe));
	}
};
