import type { Actor } from '$lib/server/auth/access';

declare global {
	namespace App {
		interface Error {
			message: string;
			/** Names the log line that tells more. */
			id?: string;
		}
		interface Locals {
			/** The signed-in person in their team; undefined for a stranger. */
			actor?: Actor;
		}
	}
}

export {};
