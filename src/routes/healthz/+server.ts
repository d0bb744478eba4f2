import { text } from '@sveltejs/kit';

/** Says that the process serves. */
export function GET(): Response {
	return text('ok\n');
}
