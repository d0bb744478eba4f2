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
		interface PageState {
			/** What a sheet that is gone to brings back: the moment's sequence number and time. */
			restore?: { seq: number; at: string };
		}
	}
}

declare module 'svelte/elements' {
	interface HTMLLinkAttributes {
		/** HTML Standard, blocking attributes: nothing is drawn before what is linked is there. */
		blocking?: 'render';
	}
}

export {};
