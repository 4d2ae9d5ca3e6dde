import { z } from 'zod';

/** Shapes that the document names once and refers to, each under its id. */
export const SHAPES = new Map<string, z.ZodType>();

/** Asks for a schema that says the same as the type, no more and no less. */
type Exactly<T, S extends z.ZodType> = [z.output<S>] extends [T]
	? [T] extends [z.output<S>]
		? unknown
		: { 'the schema refuses what the type allows': never }
	: { 'what the schema allows is not of the type': never };

/**
 * The schema of an answer's type: `shapeOf<Person>()('Person', z.object({ … }))`. It compiles only where the
 * two agree, so that what the document promises cannot drift from what the code returns.
 */
export function shapeOf<T>() {
	return <S extends z.ZodType>(id: string, schema: S & Exactly<T, S>): S => {
		SHAPES.set(id, schema);
		return schema;
	};
}

/** A time as it is sent out: RFC 3339 in UTC. */
export const time = z.iso.datetime();
/** A number that the database handed out, or a revision. */
export const id = z.int().positive();
