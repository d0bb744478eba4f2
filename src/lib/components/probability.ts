import type { Requirement } from '$lib/calc/results';

/** How likely a requirement in doubt is kept, in words; undefined where its verdict says enough. */
export function likelihood({ probability, verdict, guardBand }: Requirement): string | undefined {
	if (!guardBand && verdict !== 'undecided') return undefined;
	const percent = probability * 100;
	if (percent >= 99.95) return verdict === 'undecided' ? 'over 99.9\u00a0% likely kept' : undefined;
	if (percent < 0.05) return verdict === 'undecided' ? 'under 0.1\u00a0% likely kept' : undefined;
	const near = percent > 99 || percent < 1;
	return `${percent.toFixed(near ? 1 : 0)}\u00a0% likely kept`;
}
