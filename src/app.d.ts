import type { Actor } from '$lib/domain/person/person';

declare global {
	namespace App {
		interface Locals {
			/** Who acts; null on the few open routes. Set by the session and token handles alone. */
			actor: Actor | null;
			/** Random id of this request, in the log and on error pages. */
			requestId: string;
		}
		interface Error {
			message: string;
			/** Under which the log holds the detail. */
			id?: string;
			code?: string;
			reasons?: string[];
		}
	}
}

export {};
