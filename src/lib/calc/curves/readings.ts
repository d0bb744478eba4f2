import { refuse, type Refusal } from '../tables/refusal';

/** Columns of a fit. `uncertainties` are the standard uncertainties of `y`, in its unit; x counts as exact. */
export interface Readings {
	x: readonly number[];
	y: readonly number[];
	uncertainties?: readonly number[];
}

/** Standard uncertainties further apart than this leave points without any weight. */
const widestRatio = 1e100;

/** Refuses columns that cannot be fitted whatever the curve is. Rows are counted from 1. */
export function refuseReadings({ x, y, uncertainties }: Readings): Refusal | undefined {
	if (x.length !== y.length)
		return refuse('lengths', `x has ${rows(x.length)} and y has ${y.length}`, { argument: 'y' });
	const fault = refuseMember('x', x) ?? refuseMember('y', y);
	if (fault || !uncertainties) return fault;
	if (uncertainties.length !== y.length)
		return refuse(
			'lengths',
			`The uncertainties have ${rows(uncertainties.length)} and y has ${y.length}`,
			{ argument: 'uncertainties' },
		);
	return refuseMember('uncertainties', uncertainties) ?? refuseUncertainties(uncertainties);
}

/** Refuses the first infinite member of a column. */
export function refuseMember(argument: string, values: readonly number[]): Refusal | undefined {
	const row = values.findIndex((value) => !Number.isFinite(value));
	if (row < 0) return undefined;
	return refuse('notFinite', `Row ${row + 1} of ${argument} is not a finite number`, { argument });
}

function refuseUncertainties(uncertainties: readonly number[]): Refusal | undefined {
	const argument = 'uncertainties';
	const row = uncertainties.findIndex((value) => value <= 0);
	if (row >= 0)
		return refuse('notPositive', `Row ${row + 1} has an uncertainty that is not above zero`, {
			argument,
			mend: 'Give every reading an uncertainty above zero, or fit without uncertainties.',
		});
	let least = Infinity;
	let most = 0;
	for (const value of uncertainties) {
		least = Math.min(least, value);
		most = Math.max(most, value);
	}
	if (most / least <= widestRatio) return undefined;
	return refuse('outOfRange', 'The uncertainties are too far apart to weigh the readings by them', {
		argument,
	});
}

const highestDegree = 12;

/** Refuses a degree that is no whole number in range, or too high for the readings. */
export function refuseDegree(
	{ x }: Readings,
	{ degree, intercept }: { degree: number; intercept: boolean },
	spread: 'stated' | 'observed',
): Refusal | undefined {
	const argument = 'degree';
	const lowest = intercept ? 0 : 1;
	if (!Number.isInteger(degree) || degree < lowest || degree > highestDegree)
		return refuse(
			'degree',
			`The degree must be a whole number from ${lowest} to ${highestDegree}`,
			{
				argument,
			},
		);
	const coefficients = degree + 1 - lowest;
	const needed = coefficients + (spread === 'observed' ? 1 : 0);
	if (x.length < needed)
		return refuse(
			'tooFew',
			`A ${curveName(degree)} needs ${needed} points here; there are ${x.length}`,
			{
				argument: 'x',
				mend:
					x.length === coefficients
						? 'Add a point, or give the uncertainties of y: nothing is left to judge the scatter by.'
						: 'Add points, or choose a lower degree.',
			},
		);
	const different = new Set(intercept ? x : x.filter((value) => value !== 0)).size;
	if (different < coefficients) return refuseRank(degree, different);
	return undefined;
}

/** The refusal where the x values do not determine the curve. */
export function refuseRank(degree: number, different?: number): Refusal {
	const why =
		different === undefined
			? 'x values too close to each other'
			: `${different} different x ${different === 1 ? 'value' : 'values'}`;
	return refuse('rank', `A ${curveName(degree)} is not determined by ${why}`, {
		argument: 'x',
		mend: 'Choose a lower degree, or add readings at other x.',
	});
}

function curveName(degree: number): string {
	if (degree === 0) return 'constant';
	return degree === 1 ? 'straight line' : `polynomial of degree ${degree}`;
}

function rows(count: number): string {
	return count === 1 ? '1 row' : `${count} rows`;
}
