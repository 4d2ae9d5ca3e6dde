import type { Actor, Person } from '../person/person';

/** Who did what, when, to which thing. */
export interface AuditLine {
	id: number;
	at: string;
	/** null: the system. */
	actor: Person | null;
	/** As they were called then. */
	actorName: string;
	via: Actor['via'];
	/** `incident.create` */
	action: string;
	/** `incident:412` */
	subject: string;
	detail: Record<string, unknown>;
}
