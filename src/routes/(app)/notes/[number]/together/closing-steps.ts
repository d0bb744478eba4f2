import { closeCode } from '$lib/protocol/closing';

/** What a person can do about a lost connection. `wait`: nothing, the page tries again by itself. */
type Step = 'reload' | 'sign in' | 'leave' | 'wait';

const steps: Record<keyof typeof closeCode, Step> = {
	tooBig: 'reload',
	restarting: 'wait',
	malformed: 'reload',
	signedOut: 'sign in',
	forbidden: 'leave',
	notFound: 'leave',
	otherEpoch: 'reload',
	tooLarge: 'reload',
	tooMuchPending: 'reload',
	tooMany: 'reload',
	tooManyPages: 'reload',
	presenceTooBig: 'reload',
	unavailable: 'wait',
	noteCrowded: 'wait',
	tooSlow: 'wait',
};

/** The step after a connection was closed for good with a code; without one an edit was refused. */
export function stepAfter(code: number | undefined): Step {
	const name = (Object.keys(closeCode) as (keyof typeof closeCode)[]).find(
		(each) => closeCode[each] === code,
	);
	return name ? steps[name] : 'reload';
}
