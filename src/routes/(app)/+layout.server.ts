import { may } from '$lib/schemas/role';
import { forMember } from '$lib/server/web/guard';
import type { LayoutServerLoadEvent } from './$types';

// Reads the address so that it runs again on the way to another page and finds a session that ended.
export const load = forMember((actor, { url }: LayoutServerLoadEvent) => {
	void url.pathname;
	const { personId: id, name, email, role, teamName: team } = actor;
	return Promise.resolve({
		person: { id, name, email, role, team },
		may: {
			write: may(role, 'write'),
			readWorkingCopy: may(role, 'readWorkingCopy'),
			administer: may(role, 'administer'),
		},
	});
});
