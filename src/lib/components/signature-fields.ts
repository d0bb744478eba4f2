import type { SignOff } from '$lib/schemas/review';

const meanings = ['prepared', 'checked', 'approved'] as const;

interface SignatureField {
	meaning: (typeof meanings)[number];
	signOff: SignOff | undefined;
	/** Whether it is this sign-off's turn. */
	waiting: boolean;
}

/** The three signature fields of a title block. What was returned, or not proposed yet, waits for nothing. */
export function signatureFields(signOffs: SignOff[]): SignatureField[] {
	const open = signOffs.length > 0 && !signOffs.some((one) => one.meaning === 'returned');
	const next = meanings.find((meaning) => !signOffs.some((one) => one.meaning === meaning));
	return meanings.map((meaning) => ({
		meaning,
		signOff: signOffs.find((one) => one.meaning === meaning),
		waiting: open && meaning === next,
	}));
}
