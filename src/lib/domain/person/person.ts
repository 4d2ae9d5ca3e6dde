/** Roles, each includes the one before. */
export const ROLES = ['reader', 'responder', 'curator', 'administrator'] as const;
export type Role = (typeof ROLES)[number];

/** A person as others see them. */
export interface Person {
	id: number;
	name: string;
}

/** Who acts: a person through a session or a token, or the system itself (command line, jobs). */
export interface Actor {
	/** null: the system. */
	personId: number | null;
	name: string;
	role: Role;
	via: 'session' | 'token' | 'system';
	/** The token's id where one was used. */
	tokenId: number | null;
}

/** The system's own hand: command line, demonstration, background work. */
export const SYSTEM: Actor = {
	personId: null,
	name: 'Catchwater',
	role: 'administrator',
	via: 'system',
	tokenId: null
};
