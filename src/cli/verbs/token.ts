import { z } from 'zod';
import { personInput, TOKEN_MAX_DAYS, tokenInput } from '$lib/domain/person/person-input';
import { SYSTEM } from '$lib/domain/person/person';
import * as people from '$lib/server/people/people-service';
import * as tokens from '$lib/server/sessions/tokens-service';
import { readArgs, readOptions, type Verb } from '../verb';
import { report, withFolder } from '../with-folder';

const options = tokenInput.extend({
	email: personInput.shape.email,
	days: z.coerce.number().pipe(tokenInput.shape.days.unwrap()).default(90)
});

export const token: Verb = {
	help: `Usage: catchwater token --email ADDRESS --name WHAT-FOR --role ROLE [--days N]

Makes a token with which a program acts as the person of that address, and prints it: it is kept nowhere.
ROLE is no higher than the person's. N is 90 unless given, at most ${TOKEN_MAX_DAYS}.`,
	run(args) {
		const text = { type: 'string' } as const;
		const { values } = readArgs({ args, options: { email: text, name: text, role: text, days: text } });
		const input = readOptions(options, values);
		return withFolder(async () => {
			const person = await people.find(SYSTEM, input.email);
			if (!person.ok) return report(person, () => '');
			const made = await tokens.create(SYSTEM, { ...input, personId: person.value.id });
			return report(made, (value) => value.token);
		});
	}
};
