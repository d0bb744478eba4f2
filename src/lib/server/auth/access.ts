import { AppError } from '$lib/errors';
import { may, type Deed, type Role } from '$lib/schemas/role';

/** A signed-in person in one team. Every domain verb takes it first and checks it first. */
export interface Actor {
	personId: string;
	name: string;
	email: string;
	teamId: string;
	teamName: string;
	role: Role;
	/** When the session began; absent where none is in use. */
	signedInAt?: Date;
}

/** Throws AppError `forbidden` where the actor's role does not allow the deed. */
export function demand(actor: Actor, deed: Deed): void {
	if (!may(actor.role, deed)) {
		throw new AppError('forbidden', `Your role (${actor.role}) does not allow this.`);
	}
}
