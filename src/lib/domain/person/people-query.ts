import { z } from 'zod';
import { pageQuery } from '../incident/incident-filter';
import { ROLES } from './person';

/** Query of the list of people. */
export const peopleQuery = pageQuery.extend({
	/** true: those who may sign in; false: those who left; left out: everybody. */
	active: z.boolean('Give true or false.').optional(),
	role: z.enum(ROLES, { error: `Give one of ${ROLES.join(', ')}.` }).optional()
});
export type PeopleQuery = z.infer<typeof peopleQuery>;

/** Query of the list of tokens. */
export const tokenQuery = pageQuery.extend({
	/** Whose; one's own where it is left out. */
	person: z.number("Give a person's id.").int().positive().optional()
});
export type TokenQuery = z.infer<typeof tokenQuery>;
