import * as univariate from '../../curves/univariate';
import { isRefusal } from '../../tables/refusal';
import type { Distribution, ParameterFault } from './distribution';

/** Readings of one quantity (Type A): their mean, s/√n and n − 1 (JCGM 100:2008, 4.2). */
export interface Readings {
	mean: number;
	distribution: Distribution;
}

/** Mean and scaled t distribution of readings taken under the same conditions (JCGM 101:2008, 6.4.9.4). */
export function repeated(values: ArrayLike<number>): Readings | ParameterFault {
	const n = values.length;
	if (n < 2)
		return {
			fault: 'tooFew',
			parameter: 1,
			message: 'The spread of readings needs two of them at least',
		};
	const all = Array.from(values);
	const infinite = all.findIndex((value) => !Number.isFinite(value));
	if (infinite >= 0)
		return {
			fault: 'notFinite',
			parameter: infinite + 1,
			message: 'A reading must be a finite number',
		};
	const mean = univariate.mean(all);
	const deviation = univariate.standardDeviation(all);
	const u = isRefusal(deviation) ? 0 : deviation / Math.sqrt(n);
	if (isRefusal(mean) || !(u > 0))
		return {
			fault: 'noSpread',
			parameter: 1,
			message: 'The readings are all the same, so that they say nothing of their spread',
		};
	return {
		mean,
		distribution: { kind: 'student', parameters: [u, n - 1], uncertainty: u, dof: n - 1 },
	};
}
