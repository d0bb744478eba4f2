/** A note's number as people write it: MN-014. */
export function formatNumber(prefix: string, number: number): string {
	return `${prefix}-${String(number).padStart(3, '0')}`;
}

/** The parts of a written number; undefined where it is none, or not written as `formatNumber` does. */
export function parseNumber(written: string): { prefix: string; number: number } | undefined {
	const match = /^([A-Z]{1,6})-(\d{3,9})$/.exec(written);
	if (!match?.[1] || !match[2]) return undefined;
	const parsed = { prefix: match[1], number: Number(match[2]) };
	return formatNumber(parsed.prefix, parsed.number) === written ? parsed : undefined;
}
