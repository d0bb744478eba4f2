import { caseGroups } from './cases';
import type { Proof } from './proof';
import { prove } from './prove';

/** Proofs of one field. */
export interface ProofGroup {
	id: string;
	title: string;
	proofs: Proof[];
}

/** Computes all published cases that the language can state. */
export function proofs(): ProofGroup[] {
	return caseGroups.map(({ id, title, cases }) => ({
		id,
		title,
		proofs: cases.filter(({ belowLanguage }) => !belowLanguage).map(prove),
	}));
}
