import { z } from 'zod';

const id = z.object({ client: z.int().min(0), clock: z.int().min(0) });

/** Yjs's relative position as JSON. */
const position = z.object({
	type: id.nullish(),
	tname: z.string().max(100).nullish(),
	item: id.nullish(),
	assoc: z.int().optional(),
});

/** What a page may say about its person; who that is, and their colour, the server knows. */
export const ownPresence = z.object({
	cursor: z.object({ anchor: position, head: position }).nullish().catch(null),
	cellId: z.string().max(40).nullish().catch(null),
});

/** A person in a note as the others see them. `user` has the names that the editor's cursors read. */
export const presence = ownPresence.extend({
	user: z.object({ id: z.string(), name: z.string(), color: z.string(), colorLight: z.string() }),
});
export type Presence = z.infer<typeof presence>;
