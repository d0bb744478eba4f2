/** How faults are run, from the environment that `npm run faults` sets. */
export interface Form {
	/** The long form; the short one takes part in `npm test`. */
	isFull: boolean;
	seed: number;
	/** Ids of the faults to run; empty: all of them. */
	only: readonly string[];
}

export function readForm(): Form {
	const { FAULTS_FORM, FAULTS_SEED, FAULTS_ONLY = '' } = process.env;
	const seed = Number(FAULTS_SEED);
	return {
		isFull: FAULTS_FORM === 'full',
		seed: FAULTS_SEED && Number.isInteger(seed) ? seed : Math.floor(Math.random() * 2 ** 31),
		only: FAULTS_ONLY.split(',').filter(Boolean),
	};
}
