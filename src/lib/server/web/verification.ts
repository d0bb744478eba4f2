import { fail, type ActionFailure, type RequestEvent } from '@sveltejs/kit';
import { AppError, statusOf } from '$lib/errors';
import type { verifying } from '$lib/schemas/review';
import * as dropped from '../signed-record/dropped';
import { expected, toHttp } from './errors';
import { Pace } from './pace';

/** Strangers may ask, so nobody may ask much. */
const pace = new Pace({ who: 'Your scripts', atOnce: 2, burst: 20, perSecond: 1 });

interface Answer {
	/** What was typed. */
	digest: string;
	message?: string;
	outcome?: dropped.Outcome;
}

/** Verifies the beginning of a digest that a stranger's address holds. */
export async function known(event: RequestEvent, digits: string): Promise<dropped.Outcome> {
	try {
		return await pace.run(event.getClientAddress(), () => dropped.beginning(digits));
	} catch (thrown) {
		throw toHttp(thrown);
	}
}

/** Verifies what a stranger's form holds: a file, or a digest where there is none. */
export async function verified(
	event: RequestEvent,
	schema: typeof verifying,
): Promise<Answer | ActionFailure<Answer>> {
	let typed = '';
	try {
		return await pace.run(event.getClientAddress(), async () => {
			const form = await event.request.formData().catch((cause: unknown) => {
				throw new AppError(
					'tooLarge',
					'The file did not arrive whole, or it is larger than 500 kB.',
					{
						cause,
					},
				);
			});
			const parsed = schema.safeParse({ digest: form.get('digest') ?? '' });
			if (!parsed.success) throw new AppError('invalid', 'A digest has 64 digits.');
			typed = parsed.data.digest;
			const sent = form.get('file');
			if (sent instanceof File && sent.size > 0) {
				return { digest: '', outcome: await dropped.file(Buffer.from(await sent.arrayBuffer())) };
			}
			if (typed.trim() === '') throw new AppError('invalid', 'Choose a file, or type a digest.');
			return { digest: typed, outcome: await dropped.digest(typed) };
		});
	} catch (thrown) {
		const failure = expected(thrown);
		if (!failure) throw toHttp(thrown);
		return fail(statusOf[failure.code], { digest: typed, message: failure.message });
	}
}
